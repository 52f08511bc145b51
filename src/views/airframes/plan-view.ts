/** Plan view of an airframe from its lengths alone: outlines in metres, x across to the right, y forward up. */
export interface PlanLengths {
  spanM: number;
  chordM: number;
  finArmM: number;
  engines: readonly { kind: 'propeller' | 'jet'; yM: number; name: string }[];
}

export interface PlanView {
  wing: string;
  tail: string;
  fuselage: string;
  nacelles: string[];
  /** Propeller discs seen from above: [centre x, y, half width]. */
  propellers: { x: number; y: number; half: number }[];
  noseY: number;
  tailY: number;
  finY: number;
}

type Pair = readonly [number, number];
const polygon = (points: readonly Pair[]): string =>
  `M${points.map(([x, y]) => `${round(x)},${round(-y)}`).join('L')}Z`;

/** Drawn with y down (SVG); the mass centre is the origin. */
export function planView({ spanM: b, chordM: c, finArmM: arm, engines }: PlanLengths): PlanView {
  const jet = engines.some((engine) => engine.kind === 'jet');
  const half = b / 2;
  const sweep = jet ? 0.5 : 0.06;
  const width = jet ? 0.055 * b : 0.062 * b;
  const nose = jet ? 0.47 * b : 0.34 * b;
  const tail = -arm - 0.05 * b;
  const mirror = (points: readonly Pair[]): Pair[] => [
    ...points,
    ...[...points].reverse().map(([x, y]): Pair => [-x, y]),
  ];
  const lead = (x: number): number => 0.42 * c - sweep * x;
  const chord = (x: number): number => c * (1.28 - (0.62 * x) / half);
  const wing = mirror([
    [0, lead(0)],
    [0.97 * half, lead(0.97 * half)],
    [half, lead(half) - 0.16 * c],
    [half, lead(half) - chord(half) + 0.1 * c],
    [0, lead(0) - chord(0)],
  ]);
  const stab = 0.17 * b;
  const tailplane = mirror([
    [0, -arm + 0.34 * c],
    [stab, -arm + 0.16 * c - 0.3 * sweep * stab],
    [stab, -arm - 0.32 * c - 0.3 * sweep * stab],
    [0, -arm - 0.4 * c],
  ]);
  const fuselage = mirror([
    [0, nose],
    [0.34 * width, nose - 0.25 * width],
    [0.68 * width, nose - 0.9 * width],
    [0.92 * width, nose - 1.9 * width],
    [width, nose - 3.2 * width],
    [width, -0.6 * c],
    [0.66 * width, tail * 0.55],
    [0.33 * width, tail * 0.85],
    [0.1 * width, tail],
  ]);
  const onWing = engines.filter((engine) => engine.yM !== 0);
  const nacelles = onWing.map(({ kind, yM }) => {
    const r = kind === 'propeller' ? 0.25 * c : 0.24 * c;
    const root = lead(Math.abs(yM));
    const front = root + (kind === 'propeller' ? 0.78 * c : 0.5 * c);
    const back = kind === 'propeller' ? root - 1.2 * c : front - 1.15 * c;
    return polygon([
      [yM - 0.5 * r, front],
      [yM + 0.5 * r, front],
      [yM + r, front - 0.35 * c],
      [yM + 0.9 * r, (front + back) / 2],
      [yM + 0.35 * r, back],
      [yM - 0.35 * r, back],
      [yM - 0.9 * r, (front + back) / 2],
      [yM - r, front - 0.35 * c],
    ]);
  });
  const propellers = engines
    .filter((engine) => engine.kind === 'propeller')
    .map(({ yM }) => ({
      x: yM,
      y: -(yM === 0 ? nose + 0.04 * c : lead(Math.abs(yM)) + 0.82 * c),
      half: 0.085 * b,
    }));
  return {
    wing: polygon(wing),
    tail: polygon(tailplane),
    fuselage: polygon(fuselage),
    nacelles,
    propellers,
    noseY: -nose,
    tailY: -tail,
    finY: arm,
  };
}

function round(value: number): number {
  return Math.round(value * 1000) / 1000;
}
