import { describe, expect, it } from 'vitest';
import { signalAt } from '#shared/analysis/input-shapes.ts';
import { inputColumn, withYawDamper } from '#shared/analysis/lateral-system.ts';
import { analyseLateral } from '#shared/analysis/lateral-analysis.ts';
import { lateralModes } from '#shared/analysis/modes.ts';
import { withParameter } from '#shared/analysis/parameters.ts';
import { timeResponse } from '#shared/analysis/responses.ts';
import { bilinearSystem, rootLocus } from '#shared/analysis/sweeps.ts';
import { frequencyResponse, transferFunction } from '#shared/analysis/transfer-functions.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { matrixExponential } from '#shared/numerics/matrix-exponential.ts';
import { multiply } from '#shared/numerics/matrix.ts';
import { characteristicPolynomial } from '#shared/numerics/polynomial.ts';
import { routhDiscriminant } from '#shared/numerics/routh.ts';
import { solveLinear } from '#shared/numerics/solve-linear.ts';
import { DEG, KT } from '#shared/units/constants.ts';
import { SHIPPED } from '../../reference/shipped-airframes.ts';

const aircraft = prepareAircraft(SHIPPED['twin-jet']);
const condition = { tasMps: 150 * KT, heightM: 0 };
const system = buildSmallDisturbance(aircraft, condition);
const step = (amplitude: number) => ({ shape: 'step', amplitude, startS: 0, durationS: 1 }) as const;

describe('time responses', () => {
  it('agree with the exact solution of the linear system', () => {
    const response = timeResponse(system, {
      input: 'rudder',
      signal: step(2 * DEG),
      endS: 12,
      points: 25,
      tolerance: 1e-11,
    });
    const particular = solveLinear(
      system.A,
      system.B.rudder.map((b) => -b * 2 * DEG),
      4,
    );
    response.timeS.forEach((t, k) => {
      const transition = matrixExponential(
        system.A.map((a) => a * t),
        4,
      );
      const exact = multiply(
        transition,
        particular.map((x) => -x),
        4,
        4,
        1,
      ).map((x, i) => x + particular[i]);
      expect(response.betaRad[k]).toBeCloseTo(exact[0], 7);
      expect(response.pRadS[k]).toBeCloseTo(exact[1], 7);
      expect(response.rRadS[k]).toBeCloseTo(exact[2], 7);
      expect(response.phiRad[k]).toBeCloseTo(exact[3], 7);
    });
  });

  it('superpose: a doublet is a step up, two steps down and a step up', () => {
    const at = (shape: 'step' | 'doublet', amplitude: number, startS: number) =>
      timeResponse(system, {
        input: 'aileron',
        signal: { shape, amplitude, startS, durationS: 1 },
        endS: 6,
        points: 61,
      }).phiRad;
    const doublet = at('doublet', 0.1, 1);
    const [a, b, c] = [at('step', 0.1, 1), at('step', -0.2, 2), at('step', 0.1, 3)];
    doublet.forEach((phi, k) => expect(phi).toBeCloseTo(a[k] + b[k] + c[k], 7));
  });

  it('follow the actuator: the surface starts at its rate limit and ends at the command', () => {
    const actuator = { lagS: 0.1, rateRadS: 20 * DEG, maxRad: 10 * DEG };
    const { timeS, input } = timeResponse(system, {
      input: 'aileron',
      signal: step(30 * DEG),
      endS: 3,
      points: 61,
      actuator,
    });
    expect(input[1]).toBeCloseTo(20 * DEG * timeS[1], 6);
    expect(input[60]).toBeCloseTo(10 * DEG, 4);
  });

  it('feel a steady side gust as the same sideslip with the wings level at first', () => {
    const gust = timeResponse(system, { input: 'side-gust', signal: step(-5), endS: 0.02, points: 2 });
    const slip = timeResponse(system, {
      input: 'rudder',
      signal: step(0),
      endS: 0.02,
      points: 2,
      initial: [5 / condition.tasMps, 0, 0, 0],
    });
    expect(gust.pRadS[1]).toBeCloseTo(slip.pRadS[1], 5);
    expect(gust.rRadS[1]).toBeCloseTo(slip.rRadS[1], 5);
  });

  it('turn the nose into a gust from the right (air moving left)', () => {
    const { rRadS, pRadS } = timeResponse(system, { input: 'side-gust', signal: step(-5), endS: 1, points: 11 });
    expect(rRadS[5]).toBeGreaterThan(0);
    expect(pRadS[5]).toBeLessThan(0);
  });

  it('give a body that rolls with the air no rolling moment from a roll gust', () => {
    // x = [0, p, 0, 0] with p_g = p: aerodynamic terms cancel.
    const column = inputColumn(system, 'roll-gust');
    expect(column[1] + system.A[5]).toBeCloseTo(0, 12);
    expect(column[3]).toBe(0);
  });

  it('refuse empty spans and meaningless signals by name', () => {
    const bad = [
      { input: 'aileron', signal: step(1), endS: 0, points: 10 },
      { input: 'aileron', signal: step(1), endS: 5, points: 1 },
      { input: 'aileron', signal: step(Number.NaN), endS: 5, points: 10 },
      { input: 'aileron', signal: { ...step(1), durationS: 0 }, endS: 5, points: 10 },
    ] as const;
    for (const request of bad)
      expect(() => timeResponse(system, request)).toThrow(expect.objectContaining({ code: 'bad-argument' }));
  });
});

describe('input shapes', () => {
  it('have their peaks and ends where they belong', () => {
    const at = (shape: 'pulse' | 'doublet' | 'ramp' | 'one-minus-cosine', t: number) =>
      signalAt({ shape, amplitude: 2, startS: 1, durationS: 4 }, t);
    expect([0.9, 1, 4.9, 5.1].map((t) => at('pulse', t))).toEqual([0, 2, 2, 0]);
    expect([1, 5.1, 9.1].map((t) => at('doublet', t))).toEqual([2, -2, 0]);
    expect([3, 5, 50].map((t) => at('ramp', t))).toEqual([1, 2, 2]);
    expect(at('one-minus-cosine', 5)).toBeCloseTo(2, 12);
    expect(at('one-minus-cosine', 3)).toBeCloseTo(1, 12);
    expect(at('one-minus-cosine', 9.01)).toBe(0);
  });
});

describe('transfer functions', () => {
  it('have the steady state that the response reaches (stable spiral: |Cl_beta| doubled)', () => {
    const stable = buildSmallDisturbance(withParameter(aircraft, condition, 'Cl_beta', -0.25).aircraft, condition);
    const h = transferFunction(stable.A, stable.B.rudder, 0, 4);
    const { betaRad } = timeResponse(stable, { input: 'rudder', signal: step(0.01), endS: 600, points: 3 });
    expect(betaRad[2] / 0.01).toBeCloseTo(h.steadyState ?? NaN, 3);
  });

  it('equal gain · Π(s − zeros)/Π(s − poles), and C (sI − A)⁻¹ B at a frequency', () => {
    const h = transferFunction(system.A, system.B.aileron, 1, 4);
    const omega = 0.7;
    const product = (roots: { re: Float64Array; im: Float64Array }) =>
      Array.from(roots.re).reduce((size, re, i) => size * Math.hypot(re, omega - roots.im[i]), 1);
    const [point] = frequencyResponse(h, omega, 2 * omega, 2);
    expect(point.magnitude).toBeCloseTo((Math.abs(h.gain) * product(h.zeros)) / product(h.poles), 9);
    // (iω − A) x = B as real equations.
    const m = new Float64Array(64);
    for (let i = 0; i < 4; i++) {
      for (let j = 0; j < 4; j++) {
        m[i * 8 + j] = -system.A[i * 4 + j];
        m[(i + 4) * 8 + j + 4] = -system.A[i * 4 + j];
      }
      m[i * 8 + i + 4] = -omega;
      m[(i + 4) * 8 + i] = omega;
    }
    const x = solveLinear(m, [...system.B.aileron, 0, 0, 0, 0], 8);
    expect(point.magnitude).toBeCloseTo(Math.hypot(x[1], x[5]), 9);
    expect(point.decibel).toBeCloseTo(20 * Math.log10(point.magnitude), 9);
  });

  it('have a phase without jumps of a turn', () => {
    const points = frequencyResponse(transferFunction(system.A, system.B.rudder, 3, 4), 0.01, 50, 400);
    for (let i = 1; i < points.length; i++)
      expect(Math.abs(points[i].phaseDeg - points[i - 1].phaseDeg)).toBeLessThan(180);
    expect(points[0].omegaRadS).toBeCloseTo(0.01, 12);
    expect(points[399].omegaRadS).toBe(50);
  });

  it('refuse an input that does not reach the state', () => {
    expect(() => transferFunction(system.A, new Float64Array(4), 0, 4)).toThrow(
      expect.objectContaining({ code: 'bad-argument' }),
    );
  });
});

describe('yaw damper', () => {
  it('adds damping to the Dutch roll and nothing for no gain', () => {
    const plain = analyseLateral(aircraft, condition).found.modes[0];
    const damped = analyseLateral(aircraft, condition, { yawDamper: true }).found.modes[0];
    expect(damped.zeta).toBeGreaterThan((plain.zeta ?? NaN) + 0.05);
    const idle = lateralModes(withYawDamper(system.A, system.B.rudder, { gainS: 0, washoutS: 4 }), 5);
    expect(idle.modes[0].re).toBeCloseTo(plain.re, 9);
    expect(idle.modes[3]).toMatchObject({ kind: 'washout' });
    expect(idle.modes[3].re).toBeCloseTo(-0.25, 9);
  });

  it('is refused by name where the airframe has none', () => {
    const twin = prepareAircraft(SHIPPED['light-twin']);
    expect(() => analyseLateral(twin, condition, { yawDamper: true })).toThrow(
      expect.objectContaining({ code: 'bad-argument' }),
    );
  });
});

describe('sweeps', () => {
  it('cross the Routh boundary where the spiral root or an oscillation changes sign', () => {
    const values = Float64Array.from({ length: 400 }, (_, i) => -0.4 + (0.45 * i) / 399);
    let crossings = 0;
    let last: { constant: number; routh: number; spiral: number; growth: number } | null = null;
    for (const value of values) {
      const { A } = buildSmallDisturbance(withParameter(aircraft, condition, 'Cl_beta', value).aircraft, condition);
      const polynomial = characteristicPolynomial(A, 4);
      const { modes } = lateralModes(A);
      const spiral = modes.find((mode) => mode.kind === 'spiral')?.re ?? NaN;
      const growth = Math.max(...modes.filter((mode) => mode.im > 0).map((mode) => mode.re));
      const now = { constant: polynomial[4], routh: routhDiscriminant(polynomial), spiral, growth };
      if (last) {
        // E changes sign exactly where the spiral root does; R where the oscillation does (E > 0 beside it).
        if (last.spiral * now.spiral < 0) crossings++;
        expect(last.constant * now.constant < 0).toBe(last.spiral * now.spiral < 0);
        if (last.constant > 0 && now.constant > 0)
          expect(last.routh * now.routh < 0).toBe(last.growth * now.growth < 0);
      }
      last = now;
    }
    expect(crossings).toBeGreaterThan(0);
  });

  it('follow each root as a continuous branch and lose none', () => {
    const values = Float64Array.from({ length: 200 }, (_, i) => -0.3 + (0.35 * i) / 199);
    const { branches } = rootLocus(aircraft, condition, 'Cl_beta', values);
    for (const { re, im } of branches) {
      for (let k = 1; k < values.length; k++)
        expect(Math.hypot(re[k] - re[k - 1], im[k] - im[k - 1])).toBeLessThan(0.05);
    }
    const at = 120;
    const { A } = buildSmallDisturbance(withParameter(aircraft, condition, 'Cl_beta', values[at]).aircraft, condition);
    const trace = A[0] + A[5] + A[10] + A[15];
    expect(branches.reduce((sum, branch) => sum + branch.re[at], 0)).toBeCloseTo(trace, 9);
    expect(rootLocus(aircraft, condition, 'Cl_beta', values.slice(0, 3), true).branches).toHaveLength(5);
  });

  it('build the matrix of a map exactly as the model does', () => {
    const { base, alongX, alongY } = bilinearSystem(aircraft, condition, 'Cl_beta', 'Cn_beta');
    const first = withParameter(aircraft, condition, 'Cl_beta', -0.17);
    const { A } = buildSmallDisturbance(withParameter(first.aircraft, condition, 'Cn_beta', 0.08).aircraft, condition);
    for (let i = 0; i < 16; i++) expect(base[i] - 0.17 * alongX[i] + 0.08 * alongY[i]).toBeCloseTo(A[i], 10);
  });

  it('refuse what has no meaning by name', () => {
    expect(() => rootLocus(aircraft, condition, 'Cl_beta', [])).toThrow(
      expect.objectContaining({ code: 'bad-argument' }),
    );
    expect(() => bilinearSystem(aircraft, condition, 'mass', 'Cn_beta')).toThrow(
      expect.objectContaining({ code: 'bad-argument' }),
    );
    expect(() => withParameter(aircraft, condition, 'mass', -1)).toThrow(
      expect.objectContaining({ code: 'bad-argument' }),
    );
    expect(() => withParameter(aircraft, condition, 'Ixz', 1e12)).toThrow(
      expect.objectContaining({ code: 'bad-argument' }),
    );
  });
});
