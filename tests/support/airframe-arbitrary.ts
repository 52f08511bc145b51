import fc from 'fast-check';

/**
 * Random documents that the airframe format accepts: ordinary aeroplanes, and hostile ones whose derivatives vanish,
 * change sign or are absurdly large.
 */

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });
/** A derivative: mostly of ordinary size about a typical value, sometimes zero, reversed or huge. */
const derivative = (typical: number) =>
  fc.oneof(
    { weight: 8, arbitrary: between(0.3, 2).map((k) => k * typical) },
    { weight: 1, arbitrary: fc.constant(0) },
    { weight: 1, arbitrary: between(-5, 5) },
    { weight: 1, arbitrary: between(-1, 1).map((k) => -k * typical) },
  );

const row = (CL: number, body: boolean) =>
  fc.record({
    CL: fc.constant(CL),
    ...(body ? { alpha_deg: between(-5, 20) } : {}),
    CY_beta: derivative(-0.7),
    CY_p: derivative(-0.03),
    CY_r: derivative(0.35),
    CY_da: derivative(0.01),
    CY_dr: derivative(0.19),
    Cl_beta: derivative(-0.09),
    Cl_p: derivative(-0.5),
    Cl_r: derivative(0.2),
    Cl_da: derivative(0.16),
    Cl_dr: derivative(0.012),
    Cn_beta: derivative(0.09),
    Cn_p: derivative(-0.07),
    Cn_r: derivative(-0.13),
    Cn_da: derivative(-0.012),
    Cn_dr: derivative(-0.09),
  });

const configuration = (name: string, body: boolean) =>
  fc
    .tuple(between(0.8, 3), fc.integer({ min: 1, max: 4 }), between(-0.2, 0.6), between(0.2, 0.9))
    .chain(([CLmax, count, first, step]) =>
      fc.record({
        name: fc.constant(name),
        CLmax: fc.constant(CLmax),
        CD0: between(0, 0.15),
        kInduced: between(0, 0.1),
        CD_beta2: between(0, 0.5),
        category: fc.constantFrom('A', 'B', 'C'),
        derivatives: fc.tuple(...Array.from({ length: count }, (_, i) => row(first + i * step, body))),
      }),
    );

const engine = (name: string) =>
  fc.record({
    name: fc.constant(name),
    kind: fc.constantFrom('propeller', 'jet'),
    y_m: fc.oneof(between(-25, 25), fc.constant(0)),
    staticThrust_N: between(100, 300_000),
    power_W: between(1000, 3_000_000),
    efficiency: between(0.1, 1),
    rotation: fc.constantFrom('clockwise', 'counter-clockwise'),
    bladeOffset_m: between(0, 0.5),
    slipstreamLift: between(-0.2, 0.6),
    torqueArm_m: between(0, 0.5),
    swirlArm_m: between(0, 0.5),
    windmillDragArea_m2: between(0, 3),
    featheredDragArea_m2: between(0, 1),
    spoolDown_s: between(0, 4),
    spoolUp_s: between(0, 6),
    featherTime_s: between(0, 10),
  });

const fin = fc.record({
  area_m2: between(0.1, 80),
  arm_m: between(-2, 35),
  height_m: between(-1, 9),
  liftSlope_per_rad: between(0.5, 5),
  sidewash: between(-0.3, 0.5),
  rudderTau: between(0, 1),
  stallAngle_deg: between(4, 40),
  stallDrop: between(0, 1),
  dorsal: fc.boolean(),
});

const rudderRatio = fc.oneof(
  fc.record({
    mode: fc.constantFrom('ratio', 'limit'),
    law: fc.constantFrom('inverse', 'inverse-square'),
    fullUpTo_kt: between(40, 250),
  }),
  fc.record({
    mode: fc.constantFrom('ratio', 'limit'),
    law: fc.constant('table'),
    table: fc
      .uniqueArray(fc.integer({ min: 0, max: 400 }), { minLength: 1, maxLength: 6 })
      .chain((speeds) =>
        fc.tuple(...[...speeds].sort((a, b) => a - b).map((kt) => between(0.01, 1).map((k) => [kt, k]))),
      ),
  }),
);

const pedalForce = fc.oneof(
  fc.record({
    kind: fc.constant('reversible'),
    N_per_deg: between(1, 80),
    at_kt: between(30, 200),
    limit_N: between(50, 1000),
  }),
  fc.record({ kind: fc.constant('artificial'), N_per_deg: between(1, 80), limit_N: between(50, 1000) }),
);

const optional = <T>(arbitrary: fc.Arbitrary<T>) => fc.option(arbitrary, { nil: undefined });

/** A document of `sidewash.airframe/1` that its parser accepts. */
export const airframeDocument: fc.Arbitrary<Record<string, unknown>> = fc.boolean().chain((body) =>
  fc
    .record({
      span: between(4, 70),
      aspect: between(1.5, 30),
      density: between(5, 700),
      ixx: between(0.02, 0.3),
      izz: between(0.04, 0.5),
      product: between(-0.8, 0.8),
      class: fc.constantFrom('I', 'II', 'II-L', 'II-C', 'III', 'IV'),
      configurations: fc
        .integer({ min: 1, max: 2 })
        .chain((n) => fc.tuple(...['first', 'second'].slice(0, n).map((name) => configuration(name, body)))),
      engines: fc.integer({ min: 0, max: 4 }).chain((n) => fc.tuple(...['a', 'b', 'c', 'd'].slice(0, n).map(engine))),
      fin: optional(fin),
      rudderRatio: optional(rudderRatio),
      pedalForce: optional(pedalForce),
      yawDamper: optional(
        fc.record({ gain_s: between(0, 4), washout_s: between(0.2, 10), authority_deg: between(0, 10) }),
      ),
      aileronMax_deg: between(1, 40),
      rudderMax_deg: between(1, 40),
      rate: between(5, 200),
      lag_s: between(0, 0.3),
      uncertainty: fc.oneof(between(0, 30), fc.constant(300)),
    })
    .map((d) => {
      const area = (d.span * d.span) / d.aspect;
      const mass = d.density * area;
      const unit = mass * d.span * d.span;
      const [Ixx, Izz] = [d.ixx * d.ixx * unit, d.izz * d.izz * unit];
      return withoutUndefined({
        format: 'sidewash.airframe/1',
        name: 'random',
        class: d.class,
        geometry: { wingArea_m2: area, wingSpan_m: d.span, meanChord_m: area / d.span },
        mass: {
          mass_kg: mass,
          Ixx_kgm2: Ixx,
          Izz_kgm2: Izz,
          Ixz_kgm2: d.product * Math.sqrt(Ixx * Izz),
          axes: body ? 'body' : 'stability',
        },
        configurations: d.configurations,
        engines: d.engines,
        fin: d.fin,
        yawDamper: d.yawDamper,
        controls: {
          aileronMax_deg: d.aileronMax_deg,
          rudderMax_deg: d.rudderMax_deg,
          aileronRate_deg_s: d.rate,
          rudderRate_deg_s: d.rate,
          lag_s: d.lag_s,
          rudderRatio: d.rudderRatio,
          pedalForce: d.pedalForce,
        },
        sources: [{ field: '*', text: 'random', uncertainty_pct: d.uncertainty }],
      });
    }),
);

function withoutUndefined(value: Record<string, unknown>): Record<string, unknown> {
  const plain: unknown = JSON.parse(JSON.stringify(value));
  return typeof plain === 'object' && plain !== null ? { ...plain } : {};
}
