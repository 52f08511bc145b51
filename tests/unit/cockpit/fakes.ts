/** Small stand-ins for a run and an observation; numbers are made up. */
import type { MomentParts, Observation } from '#shared/model/plant-types.ts';
import type { Recorder, RecordedChunk } from '#shared/scenario/recording.ts';
import type { ControlSample, EndReason, Run } from '#shared/scenario/run-types.ts';

const parts = (): MomentParts => ({ beta: 0, p: 0, r: 0, aileron: 0, rudder: 0, fin: 0, thrust: 0, inertia: 0 });

const NUMBERS = [
  'tick', 'timeS', 'betaRad', 'pRadS', 'rRadS', 'phiRad', 'thetaRad', 'psiRad', 'tasMps', 'casMps', 'easMps', 'mach',
  'northM', 'eastM', 'heightM', 'heightAboveRunwayM', 'groundSpeedMps', 'trackRad', 'verticalSpeedMps',
  'pitchAttitudeRad', 'alphaRad', 'CL', 'qbarPa', 'loadFactor', 'ballWidths', 'stick', 'pedal', 'aileronRad',
  'rudderRad', 'rudderAvailableRad', 'rudderMaxRad', 'aileronMaxRad', 'pedalForceN', 'pedalForceLimitN', 'rudderRatio',
  'yawDamperRad', 'engineYawNm', 'engineRollNm', 'forceRudderN', 'forceFinN', 'forceSideN', 'forceLiftLeftN',
  'forceLiftRightN', 'forceDragN', 'forceWeightN', 'liftLeverM', 'yawTotalNm', 'rollTotalNm', 'axMps2', 'ayMps2',
  'azMps2', 'pDotRadS2', 'qDotRadS2', 'rDotRadS2', 'qRadS', 'windNorthMps', 'windEastMps', 'gustLateralMps',
  'gustRollRadS', 'gustYawRadS', 'finAngleRad', 'finStallAngleRad',
] as const; // prettier-ignore

export function observation(part: Partial<Observation> = {}): Observation {
  const numbers = Object.fromEntries(NUMBERS.map((name) => [name, 0])) as Record<(typeof NUMBERS)[number], number>; // built from NUMBERS
  return {
    ...numbers,
    levers: new Float64Array([1, 1]),
    thrustN: new Float64Array(2),
    thrustAvailableN: new Float64Array(2),
    windmillDragN: new Float64Array(2),
    engineState: new Uint8Array(2),
    yawParts: parts(),
    rollParts: parts(),
    rudderSaturated: false,
    finStalled: false,
    outsideData: false,
    stallWarning: false,
    assistantLetGo: false,
    ...part,
  };
}

export interface FakeRun {
  run: Run;
  samples: ControlSample[];
  freezeAt: Set<number>;
  endAt: { tick: number; reason: EndReason } | null;
}

/** Moves one metre north a tick; ends and freezes when told. */
export function fakeRun(): FakeRun {
  const now = observation();
  const samples: ControlSample[] = [];
  const fake = { samples, freezeAt: new Set<number>(), endAt: null } as unknown as FakeRun; // run is added below
  let ended: EndReason | null = null;
  const run = {
    now,
    get tick() {
      return now.tick;
    },
    get timeS() {
      return now.timeS;
    },
    get ended() {
      return ended;
    },
    endDetail: null,
    get freezeRequested() {
      return fake.freezeAt.has(now.tick);
    },
    neutralSample: (): ControlSample => ({
      stick: 0,
      pedal: 0,
      pitch: 0,
      rudderTrim: 0,
      levers: new Int16Array([32767, 32767]),
      feather: new Uint8Array(2),
    }),
    step(sample: ControlSample) {
      if (ended) return;
      samples.push({ ...sample, levers: sample.levers.slice(), feather: sample.feather.slice() });
      now.tick += 1;
      now.timeS = now.tick / 120;
      now.northM += 1;
      if (fake.endAt && now.tick >= fake.endAt.tick) ended = fake.endAt.reason;
    },
    leave() {
      ended ??= 'left';
    },
    stateHash: () => '00000000000000aa',
    save: () => ({ tick: now.tick, stateHash: '00000000000000aa' }),
    restore(snapshot: { tick: number }) {
      now.tick = snapshot.tick;
      now.timeS = now.tick / 120;
    },
  };
  fake.run = run as unknown as Run; // the session uses these members only
  return fake;
}

export function fakeRecorder(): { recorder: Recorder; log: string[] } {
  const log: string[] = [];
  let pending = 0;
  let index = 0;
  let start = 0;
  const chunk = (tickCount: number): RecordedChunk => {
    const made = { index, startTick: start, tickCount, bytes: new Uint8Array([index]), hash: `h${index}` };
    index += 1;
    start += tickCount;
    pending = 0;
    return made;
  };
  const recorder = {
    add(_sample: ControlSample, tick: number) {
      pending += 1;
      if (pending === 1) log.push(`from ${tick}`);
    },
    mark(mark: { kind: string; tick: number; value?: number }) {
      log.push(`${mark.kind}@${mark.tick}${mark.value === undefined ? '' : `=${mark.value}`}`);
    },
    takeChunk: () => (pending >= 120 ? chunk(pending) : null),
    finish: () => (pending > 0 ? chunk(pending) : null),
  };
  return { recorder: recorder as unknown as Recorder, log }; // the session uses these members only
}
