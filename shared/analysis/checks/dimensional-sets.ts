import type { PublishedSet } from './data-sets.ts';
import { DC8_APPROACH, DC8_CRUISE } from './data-sets.ts';

/** Dimensional and primed derivatives as printed: ft, slug, s; Y in ft/s² per rad, L and N in 1/s² (β, δ) or 1/s (p, r). */
export interface DimensionalSet {
  set: PublishedSet;
  plain: Readonly<Record<DimensionalName, number>>;
  primed: Readonly<Record<PrimedName, number>>;
}

export type DimensionalName = 'Yb' | 'Ydr' | 'Lb' | 'Lp' | 'Lr' | 'Lda' | 'Ldr' | 'Nb' | 'Np' | 'Nr' | 'Nda' | 'Ndr';
export type PrimedName = Exclude<DimensionalName, 'Yb' | 'Ydr'>;

/** Schmidt, Introduction to Aircraft Flight Dynamics, AIAA 1998, appendix B.4 (seen). */
export const DC8_APPROACH_DIMENSIONAL: DimensionalSet = {
  set: DC8_APPROACH,
  plain: {
    Yb: -27.05,
    Ydr: 5.782,
    Lb: -1.334,
    Lp: -0.949,
    Lr: 0.611,
    Lda: 0.725,
    Ldr: 0.185,
    Nb: 0.762,
    Np: -0.119,
    Nr: -0.268,
    Nda: 0.05,
    Ndr: -0.389,
  },
  primed: {
    Lb: -1.327,
    Lp: -0.95,
    Lr: 0.609,
    Lda: 0.726,
    Ldr: 0.181,
    Nb: 0.756,
    Np: -0.124,
    Nr: -0.264,
    Nda: 0.053,
    Ndr: -0.388,
  },
};

/** The same source, cruise (seen). */
export const DC8_CRUISE_DIMENSIONAL: DimensionalSet = {
  set: DC8_CRUISE,
  plain: {
    Yb: -71.73,
    Ydr: 18.38,
    Lb: -4.449,
    Lp: -1.184,
    Lr: 0.337,
    Lda: 2.12,
    Ldr: 0.561,
    Nb: 2.175,
    Np: -0.013,
    Nr: -0.231,
    Nda: 0.052,
    Ndr: -1.173,
  },
  primed: {
    Lb: -4.424,
    Lp: -1.184,
    Lr: 0.335,
    Lda: 2.12,
    Ldr: 0.547,
    Nb: 2.148,
    Np: -0.021,
    Nr: -0.228,
    Nda: 0.065,
    Ndr: -1.169,
  },
};

/** System matrix and aileron column from the printed primed derivatives, level flight. */
export function primedSystem({ set, plain, primed }: DimensionalSet): { A: Float64Array; aileron: Float64Array } {
  const A = Float64Array.of(
    plain.Yb / set.V,
    0,
    -1,
    set.g / set.V,
    primed.Lb,
    primed.Lp,
    primed.Lr,
    0,
    primed.Nb,
    primed.Np,
    primed.Nr,
    0,
    0,
    1,
    0,
    0,
  );
  return { A, aileron: Float64Array.of(0, primed.Lda, primed.Nda, 0) };
}
