import type { Stream } from '../numerics/random.ts';
import type { RightHandSide } from '../numerics/rk4.ts';
import type { Aircraft } from './aircraft.ts';
import type { AirFlow } from './air.ts';
import type { LateralInertias } from './inertia.ts';
import type { PlantInputs, PlantSetup } from './plant-types.ts';
import type { TrimSolution, TrimSolver } from './trim.ts';
import type { TurbulenceScale } from './turbulence.ts';

/** Equations of motion of one fidelity; time counts from the start of the tick. Nothing allocates. */
export interface Motion {
  /** Writes x' into `out`, and the quantities on the way into `Core.made`. */
  rhs: RightHandSide;
  /** Writes the state a tick after `x` into `out`: classical Runge–Kutta. */
  stepInto(out: Float64Array, x: Float64Array): void;
}

/** What the parts of a plant share. All that changes from tick to tick lies in `x`, `d` and the random stream. */
export interface Core {
  readonly setup: PlantSetup;
  readonly linear: boolean;
  /** The aircraft in every configuration of the airframe, same loading; index as in the file. */
  readonly configurations: readonly Aircraft[];
  /** First and last row of each configuration in the flat derivative rows. */
  readonly rowRanges: readonly (readonly [number, number])[];
  readonly engineCount: number;
  readonly inertias: LateralInertias;
  readonly groundM: number;
  /** Integrated state (state-layout.ts). */
  readonly x: Float64Array;
  /** Memory (plant-memory.ts). */
  readonly d: number[];
  /** Held numbers of the tick, of the engines, and the quantities of the latest evaluation (tick-held.ts). */
  readonly h: number[];
  readonly e: number[];
  readonly made: number[];
  /** The part of `h` with the constant derivatives of the small-disturbance motion, and scratch of the same length. */
  readonly linearRow: Float64Array;
  readonly blendRow: Float64Array;
  readonly inputs: PlantInputs;
  readonly stream: Stream;
  readonly air: AirFlow;
  readonly motion: Motion;
  readonly solver: TrimSolver;
  readonly trim: TrimSolution;
  readonly turbulence: TurbulenceScale;
  readonly startTrim: { aileronRad: number; rudderRad: number; betaRad: number; phiRad: number; CL: number };
}
