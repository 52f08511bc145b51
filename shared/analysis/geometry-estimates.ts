import { atan2, cos, PI, sin, tan } from '../numerics/elementary.ts';
import { NumericsError } from '../numerics/errors.ts';

/** Geometry of a vertical tail for the handbook estimate. Lengths in m, areas in m². */
export interface FinGeometry {
  wingAreaM2: number;
  wingSpanM: number;
  /** Wing aspect ratio. */
  aspectRatio: number;
  /** Sweep of the wing's quarter-chord line; rad. */
  wingSweepRad: number;
  finAreaM2: number;
  finSpanM: number;
  /** Fuselage radius at the fin, r1. */
  fuselageRadiusM: number;
  /** Largest fuselage depth d. */
  fuselageDepthM: number;
  /** Height of the fuselage centre line above the wing root quarter chord, positive for a low wing. */
  wingBelowCentreM: number;
  /** Distance of the fin's pressure centre behind and above the reference point, body axes. */
  armM: number;
  heightM: number;
  /** Fin lift slope; 1/rad. */
  liftSlopePerRad: number;
  /** Angle of attack between body and stability axes. */
  alphaRad: number;
}

export interface FinDerivatives {
  CY_beta: number;
  Cn_beta: number;
  Cl_beta: number;
  CY_r: number;
  Cn_r: number;
  Cl_r: number;
  CY_p: number;
  Cl_p: number;
  Cn_p: number;
}

function requirePositive(values: Readonly<Record<string, number>>): void {
  for (const [name, value] of Object.entries(values)) {
    if (!(value > 0) || !Number.isFinite(value)) {
      throw new NumericsError('bad-argument', `${name} is ${value}; it must be a positive number`);
    }
  }
}

/**
 * Sidewash and dynamic pressure at the fin: η(1 + ∂σ/∂β) = 0.724 + 3.06(Sv/S)/(1 + cos Λ) + 0.4 zw/d + 0.009 AR.
 *
 * @param g  Geometry.
 * @returns  The factor; about 0.8 to 1.1.
 * @throws {NumericsError} bad-argument for areas or a depth that are not positive.
 * @sign     zw positive when the wing root lies below the fuselage centre line.
 * @source   USAF Stability and Control DATCOM method, as given in several texts (seen).
 */
export function finSidewashFactor(
  g: Pick<
    FinGeometry,
    'wingAreaM2' | 'finAreaM2' | 'wingSweepRad' | 'wingBelowCentreM' | 'fuselageDepthM' | 'aspectRatio'
  >,
): number {
  requirePositive({ wingAreaM2: g.wingAreaM2, finAreaM2: g.finAreaM2, fuselageDepthM: g.fuselageDepthM });
  return (
    0.724 +
    (3.06 * (g.finAreaM2 / g.wingAreaM2)) / (1 + cos(g.wingSweepRad)) +
    (0.4 * g.wingBelowCentreM) / g.fuselageDepthM +
    0.009 * g.aspectRatio
  );
}

/**
 * Fuselage factor k of the fin: 0.76 for bv/(2 r1) below 2, linear to 1.0 at 3.5.
 *
 * @param finSpanM         Fin span bv; m.
 * @param fuselageRadiusM  Fuselage radius r1 at the fin; m.
 * @returns                k, 0.76 … 1.
 * @throws {NumericsError} bad-argument for sizes that are not positive.
 * @sign                   none
 * @source                 USAF Stability and Control DATCOM method, as given in several texts (seen).
 */
export function finFuselageFactor(finSpanM: number, fuselageRadiusM: number): number {
  requirePositive({ finSpanM, fuselageRadiusM });
  const ratio = finSpanM / (2 * fuselageRadiusM);
  return Math.min(1, Math.max(0.76, 0.76 + (0.24 * (ratio - 2)) / 1.5));
}

/**
 * What a fin of given side force slope contributes to the lateral derivatives.
 *
 * @param CY_beta    Side force slope of the fin, negative; 1/rad.
 * @param armM       lv, behind the reference point; m.
 * @param heightM    zv, above it; m.
 * @param wingSpanM  b; m.
 * @param alphaRad   Angle of attack; rad.
 * @returns          Contributions, p̂ = pb/2V and r̂ = rb/2V; 1/rad.
 * @throws {NumericsError} bad-argument for a span that is not positive.
 * @sign             Stability axes of the model.
 * @source           Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, sections 3.9 and 5.8; zv cos α − lv sin α and
 *                   lv cos α + zv sin α as in several texts (seen).
 */
export function finContributions(
  CY_beta: number,
  armM: number,
  heightM: number,
  wingSpanM: number,
  alphaRad: number,
): FinDerivatives {
  requirePositive({ wingSpanM });
  const arm = (armM * cos(alphaRad) + heightM * sin(alphaRad)) / wingSpanM;
  const height = (heightM * cos(alphaRad) - armM * sin(alphaRad)) / wingSpanM;
  return {
    CY_beta,
    Cn_beta: -CY_beta * arm,
    Cl_beta: CY_beta * height,
    CY_r: -2 * CY_beta * arm,
    Cn_r: 2 * CY_beta * arm * arm,
    Cl_r: -2 * CY_beta * arm * height,
    CY_p: 2 * CY_beta * height,
    Cl_p: 2 * CY_beta * height * height,
    Cn_p: -2 * CY_beta * arm * height,
  };
}

/**
 * The fin's contributions from its geometry: CY_β = −k·a_v·η(1 + ∂σ/∂β)·Sv/S and what follows from it.
 *
 * @param g  Geometry.
 * @returns  Contributions; 1/rad.
 * @throws {NumericsError} bad-argument naming the size that is not positive.
 * @sign     Stability axes of the model.
 * @source   As `finSidewashFactor`, `finFuselageFactor` and `finContributions`.
 */
export function estimateFin(g: FinGeometry): FinDerivatives {
  requirePositive({ liftSlopePerRad: g.liftSlopePerRad, aspectRatio: g.aspectRatio });
  const k = finFuselageFactor(g.finSpanM, g.fuselageRadiusM);
  const slope = (-k * g.liftSlopePerRad * finSidewashFactor(g) * g.finAreaM2) / g.wingAreaM2;
  return finContributions(slope, g.armM, g.heightM, g.wingSpanM, g.alphaRad);
}

/**
 * Lift slope of a fin of low aspect ratio: 2πA/(2 + √(A²(1 + tan²Λ) + 4)).
 *
 * Incompressible, section slope 2π; the effective aspect ratio of a fin is about 1.55 of its geometric one (T-tails less).
 *
 * @param effectiveAspectRatio  A; > 0.
 * @param halfChordSweepRad     Λ at half chord; rad.
 * @returns                     1/rad.
 * @throws {NumericsError} bad-argument for an aspect ratio that is not positive.
 * @sign                        none
 * @source                      E. Polhamus' formula in the USAF Stability and Control DATCOM (from memory).
 */
export function finLiftSlope(effectiveAspectRatio: number, halfChordSweepRad: number): number {
  requirePositive({ effectiveAspectRatio });
  const c = cos(halfChordSweepRad);
  const a2 = effectiveAspectRatio * effectiveAspectRatio;
  return (2 * PI * effectiveAspectRatio) / (2 + Math.sqrt(a2 / (c * c) + 4));
}

/**
 * Thin-aerofoil flap effectiveness τ = 1 − (θ − sin θ)/π with cos θ = 2 cf/c − 1.
 *
 * Inviscid; real rudders reach about 70 to 85 % of it beyond 15° of deflection.
 *
 * @param chordRatio  Flap chord over chord; 0 … 1.
 * @returns           dα/dδ; 0 … 1.
 * @throws {NumericsError} bad-argument outside 0 … 1.
 * @sign              none
 * @source            H. Glauert, "Theoretical relationships for an aerofoil with hinged flap", ARC R&M 1095 (1927).
 */
export function flapEffectiveness(chordRatio: number): number {
  if (!(chordRatio >= 0 && chordRatio <= 1)) {
    throw new NumericsError('bad-argument', `a flap chord ratio of ${chordRatio} is outside 0 … 1`);
  }
  const c = 2 * chordRatio - 1;
  const sine = Math.sqrt(Math.max(0, 1 - c * c));
  const theta = atan2(sine, c);
  return 1 - (theta - sine) / PI;
}

/**
 * Rudder derivatives from the fin: CY_δr = a_v·τ·Sv/S, Cn_δr = −CY_δr·arm/b, Cl_δr = CY_δr·height/b.
 *
 * @param g           Geometry; the side-wash factor counts with dynamic pressure only, so it is left out.
 * @param chordRatio  Rudder chord over fin chord.
 * @param spanShare   Share of the fin span that carries the rudder; 0 … 1.
 * @returns           1/rad; δr positive trailing edge left.
 * @throws {NumericsError} bad-argument.
 * @sign              CY_δr > 0, Cn_δr < 0.
 * @source            Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, section 3.9; `flapEffectiveness`.
 */
export function estimateRudder(
  g: FinGeometry,
  chordRatio: number,
  spanShare: number,
): { CY_dr: number; Cn_dr: number; Cl_dr: number } {
  requirePositive({ wingAreaM2: g.wingAreaM2, finAreaM2: g.finAreaM2, wingSpanM: g.wingSpanM });
  if (!(spanShare >= 0 && spanShare <= 1)) {
    throw new NumericsError('bad-argument', `a rudder span share of ${spanShare} is outside 0 … 1`);
  }
  const CY_dr = (g.liftSlopePerRad * flapEffectiveness(chordRatio) * spanShare * g.finAreaM2) / g.wingAreaM2;
  const arm = (g.armM * cos(g.alphaRad) + g.heightM * sin(g.alphaRad)) / g.wingSpanM;
  const height = (g.heightM * cos(g.alphaRad) - g.armM * sin(g.alphaRad)) / g.wingSpanM;
  return { CY_dr, Cn_dr: -CY_dr * arm, Cl_dr: CY_dr * height };
}

/** Stall angle of a fin with a dorsal fin: from about 15° to 25–30° (rule of thumb, from memory); the middle is offered. */
export const DORSAL_FIN_STALL_DEG = 27.5;
/** Stall angle of a plain fin (rule of thumb, from memory). */
export const PLAIN_FIN_STALL_DEG = 15;

/**
 * Stall angle to enter for a fin with a dorsal fin, from the plain fin's.
 *
 * The rule of thumb 15° → 25–30° taken as a gain of 12.5°, reduced in proportion for a dorsal fin smaller than a tenth of
 * the fin (reduction ours).
 *
 * @param plainDeg   Stall angle without it; deg.
 * @param areaShare  Dorsal fin area over fin area; 0 … 1.
 * @returns          deg.
 * @throws {NumericsError} bad-argument.
 * @sign             none
 * @source           Rule of thumb (from memory): a dorsal fin raises the stall angle from about 15° to 25–30°.
 */
export function dorsalFinStallDeg(plainDeg: number, areaShare: number): number {
  requirePositive({ plainDeg });
  if (!(areaShare >= 0 && areaShare <= 1)) {
    throw new NumericsError('bad-argument', `a dorsal fin of ${areaShare} of the fin is outside 0 … 1`);
  }
  return plainDeg + (DORSAL_FIN_STALL_DEG - PLAIN_FIN_STALL_DEG) * Math.min(1, areaShare / 0.1);
}

/**
 * Rolling moment due to sideslip of a wing from dihedral and sweep, by strip theory.
 *
 * Dihedral: −(a Γ/6)(1 + 2λ)/(1 + λ). Sweep: −(CL/3)·tan Λ·(1 + 2λ)/(1 + λ), from cos²(Λ ∓ β)/cos²Λ ≈ 1 ± 2β tan Λ on
 * the two halves with a loading in proportion to the chord. Body, fin and wing position are not in it.
 *
 * @param dihedralRad      Γ; rad.
 * @param sweepRad         Quarter-chord sweep Λ; rad.
 * @param taper            Tip chord over root chord λ; 0 … 1.
 * @param liftSlopePerRad  Wing lift slope a; 1/rad.
 * @param CL               Lift coefficient.
 * @returns                Both contributions and their sum; 1/rad.
 * @throws {NumericsError} bad-argument for a taper outside 0 … 1.
 * @sign                   Negative is stable (rolls away from the sideslip).
 * @source                 Strip theory: C. Perkins, R. Hage, Airplane Performance, Stability and Control, 1949 (from memory).
 */
export function estimateDihedralEffect(
  dihedralRad: number,
  sweepRad: number,
  taper: number,
  liftSlopePerRad: number,
  CL: number,
): { dihedral: number; sweep: number; total: number } {
  if (!(taper >= 0 && taper <= 1)) throw new NumericsError('bad-argument', `a taper of ${taper} is outside 0 … 1`);
  const shape = (1 + 2 * taper) / (6 * (1 + taper));
  const dihedral = -liftSlopePerRad * dihedralRad * shape;
  const sweep = -2 * CL * tan(sweepRad) * shape;
  return { dihedral, sweep, total: dihedral + sweep };
}

/**
 * Wing estimates of the roll–yaw cross derivatives, good to 20–40 %.
 *
 * @param CL  Lift coefficient.
 * @returns   Cl_r ≈ CL/4 and Cn_p ≈ −CL/8; per unit of the usual rates rb/2V and pb/2V.
 * @source    several texts (seen); common practice.
 */
export function estimateCrossDerivatives(CL: number): { Cl_r: number; Cn_p: number } {
  return { Cl_r: CL / 4, Cn_p: -CL / 8 };
}
