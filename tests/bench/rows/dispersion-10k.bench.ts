import { flyDispersion, type DispersionJob } from '#shared/scenario/dispersion-of-runs.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { flying } from '../../unit/model/support/plants.ts';
import { airframeOf, shippedScenario } from '../../unit/scenario/support/build-scenario.ts';
import { defineBench, median, timePair } from '../harness.ts';
import type { DispersionPart } from '../threads/dispersion-thread.ts';
import { startThreads } from '../threads/threads.ts';

const RUNS = 10_000;
const RUN_S = 20;
const SEED = 1;
const PORTION = 50;
const ROUNDS = 5;
/** One worker flies this share of what two fly: the whole on one would take the row beyond a minute. */
const ONE_WORKER_SHARE = 0.2;
const LEAST_SPEED_UP = 1.8;
const LARGEST_COST = 1.3;

/** A left engine cut with its five criteria, begun high enough that even hands off nobody meets the ground in 20 s. */
function scenario(): Scenario {
  const shipped = shippedScenario('left-engine-cut-after-lift-off');
  return { ...shipped, duration_s: RUN_S, start: { ...shipped.start, height_ft: 5000 } };
}

function portions(from: number, runs: number, base: Omit<DispersionJob, 'from' | 'to'>): DispersionJob[] {
  return Array.from({ length: runs / PORTION }, (_, i) => ({
    ...base,
    from: from + i * PORTION,
    to: from + (i + 1) * PORTION,
  }));
}

/** The product's dispersion of a scenario: every draw an aeroplane of its own, flown through trim, criteria and result. */
export default defineBench({
  name: 'dispersion-10k',
  claim: `${RUNS} drawn aeroplanes of ${RUN_S} s each over two workers, against one; their cost beside the bare stepper`,
  async run({ note, cleanUp }) {
    const base = { scenario: scenario(), airframe: airframeOf('light-twin'), seed: SEED, delayS: 1 } as const;
    const cost = (pilot: DispersionJob['pilot']) =>
      timePair(() => flyDispersion({ ...base, pilot, from: 0, to: 20 }), bareStepper(20 * RUN_S), { rounds: 9 });
    const handsOff = cost('hands-off');
    const reference = cost('reference');
    const draws = flyDispersion({ ...base, pilot: 'hands-off', from: 0, to: 20 });
    if (draws.some(({ problem }) => problem !== null)) throw new Error('a draw could not be flown');

    const threads = await startThreads<DispersionJob, DispersionPart>('dispersion-thread', 2);
    cleanUp(() => threads.close());
    const job = { ...base, pilot: 'hands-off' } as const;
    await threads.run(portions(0, 400, job), 2); // warm
    const perRound = RUNS / ROUNDS;
    const few = perRound * ONE_WORKER_SHARE;
    let [flown, problems, wallMs] = [0, 0, 0];
    const speedUps: number[] = [];
    for (let round = 0; round < ROUNDS; round++) {
      const alone = performance.now();
      await threads.run(portions(round * perRound, few, job), 1);
      const oneMs = (performance.now() - alone) / few;
      const from = performance.now();
      const parts = await threads.run(portions(round * perRound, perRound, job), 2);
      const took = performance.now() - from;
      wallMs += took;
      speedUps.push(oneMs / (took / perRound));
      for (const part of parts) [flown, problems] = [flown + part.runs, problems + part.problems];
    }
    const speedUp = median(speedUps);
    note(`${flown} runs flown over two workers, ${problems} draws that could not be flown`);
    const perSecondUs = (ms: number): number => (1000 * ms) / (20 * RUN_S);
    return {
      value: wallMs / 1000,
      unit: 's',
      ratio: handsOff.ratio,
      baseline: `the bare stepper of step-large-angle, ${perSecondUs(handsOff.baselineMs).toFixed(0)} µs a simulated second`,
      goal: `speed-up ≥ ${LEAST_SPEED_UP}, cost ratio ≤ ${LARGEST_COST}`,
      met: speedUp >= LEAST_SPEED_UP && handsOff.ratio <= LARGEST_COST,
      details: [
        { label: `speed-up, one worker flying ${few} of each ${perRound}`, value: speedUp, unit: '×' },
        { label: 'a simulated second, hands off', value: perSecondUs(handsOff.subjectMs), unit: 'µs' },
        { label: 'a simulated second, reference pilot', value: perSecondUs(reference.subjectMs), unit: 'µs' },
        { label: 'cost ratio with the reference pilot', value: reference.ratio, unit: '×' },
        { label: 'draws that could not be flown', value: problems, unit: '' },
      ],
    };
  },
});

/** The flight of step-large-angle for as many simulated seconds. */
function bareStepper(seconds: number): () => number {
  const plant = flying('light-twin', { tasKt: 80 });
  plant.failEngine(0, 'windmilling');
  plant.inputs.pedal = 0.35;
  const start = plant.save();
  return () => {
    for (let flight = 0; flight < seconds / 10; flight++) {
      plant.restore(start);
      for (let i = 0; i < 1200; i++) plant.step();
    }
    return plant.x[3];
  };
}
