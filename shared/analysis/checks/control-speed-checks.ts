import { DEG, FT, KT, LB, LBF, SLUG } from '../../units/constants.ts';
import { NumericsError } from '../../numerics/errors.ts';
import { parseAirframe } from '../../model/airframe-schema.ts';
import { prepareAircraft } from '../../model/aircraft.ts';
import type { Aircraft } from '../../model/aircraft.ts';
import { minimumControlSpeed } from '../minimum-control-speed.ts';
import { withParameter } from '../parameters.ts';
import { steadySideslips } from '../sideslip-crosswind.ts';
import { createStaticSolver } from '../static-solution.ts';
import { values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import { C310_APPROACH } from './data-sets.ts';
import { COMPUTED } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';
import { documentOfSet } from './set-airframe.ts';

/** Thrust of the live engine; lbf; and its arm; ft (assumed in the regression case). */
const THRUST_LBF = 1100;
const ARM_FT = 5.77;
/** So much power that the propeller's thrust stays at its static value at every speed. */
const CONSTANT_THRUST_POWER_W = 1e9;
const RIGHT = 1;

/** The published approach set with two engines of constant thrust and no dead-engine drag. */
function twin(): Aircraft {
  const engine = (name: string, side: number) => ({
    name,
    kind: 'propeller',
    y_m: side * ARM_FT * FT,
    staticThrust_N: THRUST_LBF * LBF,
    power_W: CONSTANT_THRUST_POWER_W,
    efficiency: 1,
  });
  const parsed = parseAirframe({
    ...documentOfSet({ ...C310_APPROACH, units: 'US' }),
    mass: {
      mass_kg: C310_APPROACH.W * LB,
      Ixx_kgm2: C310_APPROACH.Ix * SLUG * FT * FT,
      Izz_kgm2: C310_APPROACH.Iz * SLUG * FT * FT,
    },
    engines: [engine('left', -1), engine('right', 1)],
  });
  if (!parsed.ok) throw new NumericsError('bad-argument', parsed.issues[0].message);
  return prepareAircraft(parsed.airframe);
}

const DEAD_RIGHT = { lever: 1, failed: [RIGHT], feathered: true } as const;
const SPEED = 82 * KT;

function trimRows(): ValueRow[] {
  const at = (bankDeg: number) => {
    const solver = createStaticSolver(twin(), { heightM: 0, engines: DEAD_RIGHT });
    solver.solveAtBank(SPEED, bankDeg * DEG);
    return solver.at;
  };
  const expected = [
    [0, 17.7085, 4.9762, 44.4252],
    [-3, 6.1074, 0.0357, 30.3758],
    [-5, -1.611, -3.2512, 21.0286],
  ] as const;
  return expected.flatMap(([bank, beta, aileron, rudder]): ValueRow[] => [
    [`c310-beta-${-bank}`, `82 kt, bank ${bank}°: sideslip`, '°', beta, 2e-3, () => at(bank).betaRad / DEG],
    [`c310-aileron-${-bank}`, `82 kt, bank ${bank}°: aileron`, '°', aileron, 2e-3, () => at(bank).aileronRad / DEG],
    [`c310-rudder-${-bank}`, `82 kt, bank ${bank}°: rudder`, '°', rudder, 2e-3, () => at(bank).rudderRad / DEG],
  ]);
}

function speedRows(): ValueRow[] {
  const expected = [
    [0, 109.31],
    [2, 97.1],
    [4, 83.14],
  ] as const;
  const tas = (bankDeg: number) => {
    const result = minimumControlSpeed(twin(), { heightM: 0, failed: [RIGHT], bank: { exactlyRad: bankDeg * DEG } });
    if (!result.found) throw new NumericsError('bad-argument', result.message);
    return result.tasMps / KT;
  };
  return expected.map(([bank, kt]) => [
    `c310-speed-${bank}`,
    `Minimum control speed, rudder 25°, ${bank}° into the live engine`,
    'kt',
    kt,
    0.02,
    () => tas(bank),
  ]);
}

function slipRows(): ValueRow[] {
  // Without the rudder's rolling moment no aileron is needed: yaw and side force alone fix rudder and bank.
  const noAileron = () => {
    const condition = { tasMps: SPEED, heightM: 0 };
    const { aircraft } = withParameter(twin(), condition, 'Cl_dr', 0);
    const solver = createStaticSolver(aircraft, { heightM: 0, engines: DEAD_RIGHT });
    solver.solveAtSideslip(SPEED, 0);
    return solver.at;
  };
  const slip = () => {
    const aircraft = twin();
    const beta = 14.117 * DEG;
    const [point] = steadySideslips(aircraft, SPEED, 0, [beta]);
    if (!point) throw new NumericsError('bad-argument', 'the steady sideslip has no solution');
    return point;
  };
  return [
    [
      'c310-zero-rudder',
      'Zero sideslip, no aileron, 82 kt: rudder',
      '°',
      21.47,
      0.01,
      () => noAileron().rudderRad / DEG,
    ],
    ['c310-zero-bank', 'Zero sideslip, no aileron, 82 kt: bank', '°', 4.28, 0.01, () => -noAileron().phiRad / DEG],
    ['c310-slip-wind', 'Wing-down slip at β 14.117°: crosswind', 'kt', 20, 0.01, () => slip().crosswindMps / KT],
    ['c310-slip-aileron', 'Wing-down slip: aileron', '°', 6.012, 2e-3, () => slip().aileronRad / DEG],
    ['c310-slip-rudder', 'Wing-down slip: rudder', '°', 17.096, 2e-3, () => slip().rudderRad / DEG],
    ['c310-slip-bank', 'Wing-down slip: bank', '°', 3.651, 2e-3, () => slip().phiRad / DEG],
  ];
}

/** The computed regression case of the reference page. */
export function controlSpeedCases(): PublishedCase[] {
  const group = 'Minimum control speed and sideslip: Cessna 310, approach';
  const rows = [...trimRows(), ...speedRows(), ...slipRows()];
  return values({ group, ...COMPUTED, source: `worked out independently from ${C310_APPROACH.source}` }, rows);
}
