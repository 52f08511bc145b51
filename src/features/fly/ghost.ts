/** The reference pilot's aeroplane as an observation at any run time: its pose from the worker, the rest as at the start. */
import type { Observation } from '#shared/model/plant-types.ts';
import { GRID_HZ } from '../../components/charts/trace-grid.ts';
import { cloneObservation } from '../../runner/observation-copy.ts';
import { GHOST_MEMBERS, type ReferenceRun } from '../../runner/workers/reference-types.ts';

export interface Ghost {
  /** Null before the start and after the end of the other run. The same object each time. */
  at(timeS: number): Observation | null;
}

export function createGhost(like: Observation, run: ReferenceRun): Ghost {
  const shown = cloneObservation(like);
  return {
    at(timeS) {
      const place = timeS * GRID_HZ;
      const k = Math.floor(place);
      if (k < 0 || k + 1 >= run.samples || Number.isNaN(run.ghost.northM[k])) return null;
      const share = place - k;
      for (const member of GHOST_MEMBERS) {
        const column = run.ghost[member];
        shown[member] = column[k] + (column[k + 1] - column[k]) * share;
      }
      shown.timeS = timeS;
      return shown;
    },
  };
}
