/** Builds one flight from what the server started: run, recorder, input sources, recording and delivery. */
import type { StartedAttempt } from '#shared/contracts/attempts.ts';
import { createRecorder } from '#shared/scenario/recording.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { type FlightEvents, type FlightSession, createFlightSession } from '../../runner/flight-session.ts';
import { type KeyRates, type KeyboardSource, createKeyboardSource } from '../../runner/input/keyboard-source.ts';
import { type DeviceSource, type DeviceSourceSetup, createDeviceSource } from '../../runner/input/device-source.ts';
import { type PadsSource, createPadsSource } from '../../runner/input/pads-source.ts';
import type { FlightRecordKeeper } from '../../stores/delivery.store.ts';

export interface Flight {
  started: StartedAttempt;
  run: Run;
  session: FlightSession;
  keyboard: KeyboardSource;
  pads: PadsSource;
  device: DeviceSource;
}

/** How the person moves the controls. */
export interface FlightHands {
  rates: () => KeyRates;
  devices: DeviceSourceSetup['devices'];
  profile: DeviceSourceSetup['profile'];
  pressed: DeviceSourceSetup['pressed'];
}

export function runOf(started: StartedAttempt): Run {
  return createRun({
    scenario: started.scenario,
    airframe: started.airframe.airframe,
    seed: started.seed,
    drawn: started.drawn,
  });
}

export function startFlight(
  started: StartedAttempt,
  keeper: FlightRecordKeeper,
  { rates, ...hands }: FlightHands,
  events: FlightEvents,
): Flight {
  const run = runOf(started);
  const engineCount = run.plant.engineCount;
  const keyboard = createKeyboardSource(engineCount, rates());
  const pads = createPadsSource({
    returnPerS: () => rates().returnPerS,
    pedalsSpring: () => rates().pedalsSpring,
  });
  const device = createDeviceSource({ ...hands, engineCount });
  const session = createFlightSession({
    run,
    recorder: createRecorder({ attemptKeyHex: started.chunkKey, engineCount }),
    sources: [keyboard, pads, device],
    events: {
      ...events,
      chunk: (chunk) => {
        keeper.keep(chunk);
        events.chunk?.(chunk);
      },
      ended: (reason, detail) => {
        keeper.finish(session.chunkCount, reason);
        events.ended?.(reason, detail);
      },
    },
  });
  return { started, run, session, keyboard, pads, device };
}
