/** One condition as a book would print it, in every combination of units, axes, form and signs, and read back by the import. */
import { describe, expect, it } from 'vitest';
import type { LateralDerivatives } from '#shared/model/conversions.ts';
import { importLateralSet } from '#shared/model/import-set.ts';
import type { ForeignSet } from '#shared/model/import-set.ts';
import { FT } from '#shared/units/constants.ts';
import { imported, SLUG_PER_FT3 } from './imported-roots.ts';

/** What a book might print: every combination of units, axes, form, signs and unit of angle. */
const FORMS = (['SI', 'US'] as const).flatMap((units) =>
  (['stability', 'body'] as const).flatMap((axes) =>
    (['stability', 'body'] as const).flatMap((inertiaAxes) =>
      (['non-dimensional', 'dimensional', 'dimensional-primed'] as const).flatMap((form) =>
        (['right', 'left'] as const).flatMap((aileron) =>
          (['left', 'right'] as const).flatMap((rudder) =>
            (['rad', 'degree'] as const).flatMap((angles) =>
              (['b/2V', 'b/V'] as const).map((rates) => ({
                ...{ units, axes, inertiaAxes, form, aileron, rudder, angles, rates },
              })),
            ),
          ),
        ),
      ),
    ),
  ),
);
type Form = (typeof FORMS)[number];

/** A set of 1 condition in SI about stability axes, with every derivative filled (ours). */
const TRUE_SET = {
  ...{
    mass: 81_000,
    area: 236,
    span: 43.2,
    speed: 82,
    density: 1.17,
    Ixx: 4.3e6,
    Izz: 7.9e6,
    Ixz: 2.1e5,
    alphaDeg: 7.5,
  },
  derivatives: {
    ...{ CY_beta: -0.87, CY_p: -0.11, CY_r: 0.31, CY_da: 0.015, CY_dr: 0.187 },
    ...{ Cl_beta: -0.158, Cl_p: -0.385, Cl_r: 0.248, Cl_da: 0.086, Cl_dr: 0.022 },
    ...{ Cn_beta: 0.163, Cn_p: -0.087, Cn_r: -0.196, Cn_da: 0.0106, Cn_dr: -0.0834 },
  } satisfies LateralDerivatives,
};

/** The inertia matrix [[Ixx, −Ixz], [−Ixz, Izz]] turned by the rotation [[c, s], [−s, c]] (body to stability) or back. */
function turned(i: { Ixx: number; Izz: number; Ixz: number }, angle: number) {
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  const m = [
    [c * i.Ixx - s * i.Ixz, -c * i.Ixz + s * i.Izz],
    [-s * i.Ixx - c * i.Ixz, s * i.Ixz + c * i.Izz],
  ];
  return {
    Ixx: m[0][0] * c + m[0][1] * s,
    Izz: -m[1][0] * s + m[1][1] * c,
    Ixz: -(-m[0][0] * s + m[0][1] * c),
  };
}

/** The true set as a book would print it in that form; written here from the definitions, forwards. */
function printed(f: Form): ForeignSet {
  const t = TRUE_SET;
  const angle = (t.alphaDeg * Math.PI) / 180;
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  const body = turned(t, -angle);
  const d: LateralDerivatives = { ...t.derivatives };
  if (f.axes === 'body') {
    // Rates of the body make p_s = c p + s r, r_s = −s p + c r; moments about the body are L = c L_s − s N_s, N = s L_s + c N_s.
    for (const X of ['CY', 'Cl', 'Cn'] as const) {
      const [p, r] = [d[`${X}_p`], d[`${X}_r`]];
      d[`${X}_p`] = p * c - r * s;
      d[`${X}_r`] = p * s + r * c;
    }
    for (const i of ['beta', 'p', 'r', 'da', 'dr'] as const) {
      const [L, N] = [d[`Cl_${i}`], d[`Cn_${i}`]];
      d[`Cl_${i}`] = c * L - s * N;
      d[`Cn_${i}`] = s * L + c * N;
    }
  }
  const about = f.axes === 'body' ? body : t;
  const qS = 0.5 * t.density * t.speed * t.speed * t.area;
  const prime = 1 / (1 - (about.Ixz * about.Ixz) / (about.Ixx * about.Izz));
  for (const i of ['beta', 'p', 'r', 'da', 'dr'] as const) {
    const rate = i === 'p' || i === 'r';
    const perDegree = !rate && f.angles === 'degree' ? Math.PI / 180 : 1;
    const sign = (i === 'da' && f.aileron === 'left') || (i === 'dr' && f.rudder === 'right') ? -1 : 1;
    let [Y, L, N] = [d[`CY_${i}`], d[`Cl_${i}`], d[`Cn_${i}`]];
    if (f.form !== 'non-dimensional') {
      const k = rate ? t.span / (2 * t.speed) : 1;
      Y *= ((qS * k) / t.mass) * (f.units === 'US' ? 1 / FT : 1);
      L *= (qS * t.span * k) / about.Ixx;
      N *= (qS * t.span * k) / about.Izz;
      if (f.form === 'dimensional-primed') {
        [L, N] = [prime * (L + (about.Ixz / about.Ixx) * N), prime * (N + (about.Ixz / about.Izz) * L)];
      }
    } else if (rate && f.rates === 'b/V') {
      [Y, L, N] = [Y / 2, L / 2, N / 2];
    }
    d[`CY_${i}`] = Y * perDegree * sign;
    d[`Cl_${i}`] = L * perDegree * sign;
    d[`Cn_${i}`] = N * perDegree * sign;
  }
  const given = f.inertiaAxes === 'body' ? body : t;
  const slugFt2 = f.units === 'US' ? 1.3558179483314004 : 1;
  const [ft, lb, slugFt3] = f.units === 'US' ? [FT, 0.45359237, SLUG_PER_FT3] : [1, 1, 1];
  return {
    ...{ units: f.units, axes: f.axes, inertiaAxes: f.inertiaAxes, form: f.form },
    conventions: { aileron: f.aileron, rudder: f.rudder, angles: f.angles, rates: f.rates },
    ...{ mass: t.mass / lb, wingArea: t.area / (ft * ft), wingSpan: t.span / ft, speed: t.speed / ft },
    ...{ density: t.density / slugFt3, alphaDeg: t.alphaDeg, derivatives: d },
    ...{ Ixx: given.Ixx / slugFt2, Izz: given.Izz / slugFt2, Ixz: given.Ixz / slugFt2 },
  };
}

describe('one condition printed in every form', () => {
  const plain: Form = FORMS[0];
  const roots = imported(printed(plain));

  it('is an ordinary aeroplane, given with every derivative', () => {
    expect(importLateralSet(printed(plain)).row).toMatchObject(TRUE_SET.derivatives);
    expect(roots).toHaveLength(3);
  });

  it(`comes back with its own derivatives and roots from all ${FORMS.length} of them (1e-9)`, () => {
    expect(FORMS).toHaveLength(384);
    for (const form of FORMS) {
      const set = printed(form);
      const { row } = importLateralSet(set);
      for (const [name, value] of Object.entries(TRUE_SET.derivatives)) {
        const got = row[name as keyof LateralDerivatives]; // same record
        expect(Math.abs(got - value), `${name} ${JSON.stringify(form)}`).toBeLessThan(1e-9);
      }
      imported(set).forEach(([re, im], i) => {
        expect(Math.abs(re - roots[i][0]), JSON.stringify(form)).toBeLessThan(1e-9);
        expect(Math.abs(im - roots[i][1]), JSON.stringify(form)).toBeLessThan(1e-9);
      });
    }
  });
});
