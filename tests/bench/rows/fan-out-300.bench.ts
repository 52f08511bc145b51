import { setTimeout as delay } from 'node:timers/promises';
import { io, type Socket } from 'socket.io-client';
import { channelCount } from '#shared/scenario/chunk-codec.ts';
import { encodeFrame, FRAME_TICKS } from '#shared/scenario/class-frames.ts';
import { gatherCrowd, openLoadClass, startLoadProduct } from '../../load/crowd.ts';
import { until } from '../../support/class-client.ts';
import { defineBench, median, quantile, type BenchContext } from '../harness.ts';
import { startRelay } from '../kernels/relay-process.ts';

const VIEWERS = 300;
const RATE_HZ = 30;
const ROUNDS = 3;
const SECONDS = 4;
const GOAL = 1.5;

interface Side {
  send: (frame: string) => void;
  cpuS: () => number;
}
interface Measured {
  p50: number;
  p95: number;
  cpu: number;
  received: number;
}

/** Inputs of a demonstration to three hundred viewers, beside a bare socket.io relay with the same load. */
export default defineBench({
  name: 'fan-out-300',
  claim: `a demonstration's inputs at ${RATE_HZ} Hz to ${VIEWERS} viewers on one process`,
  async run({ note, cleanUp }) {
    const sent = new Map<string, number>();
    let delays: number[] = [];
    const arrived = (frame: string): void => {
      const at = sent.get(frame);
      if (at !== undefined) delays.push(performance.now() - at);
    };
    const relay = await bareSide(cleanUp, arrived);
    const product = await classSide(cleanUp, arrived);
    note(`${VIEWERS} viewers on each side`);
    let frameNumber = 0;
    async function measure(side: Side): Promise<Measured> {
      delays = [];
      const cpuFrom = side.cpuS();
      const from = performance.now();
      const frames = SECONDS * RATE_HZ;
      for (let i = 0; i < frames; i += 1) {
        const frame = frameOf(frameNumber++);
        sent.set(frame, performance.now());
        side.send(frame);
        await delay(Math.max(0, from + ((i + 1) * 1000) / RATE_HZ - performance.now()));
      }
      const cpu = (side.cpuS() - cpuFrom) / ((performance.now() - from) / 1000);
      await delay(300);
      sent.clear();
      return {
        p50: quantile(delays, 0.5),
        p95: quantile(delays, 0.95),
        cpu,
        received: delays.length / (frames * VIEWERS),
      };
    }
    await measure(relay);
    await measure(product);
    const ours: Measured[] = [];
    const bare: Measured[] = [];
    for (let round = 0; round < ROUNDS; round += 1) {
      bare.push(await measure(relay));
      ours.push(await measure(product));
    }
    const ratioOf = (of: (one: Measured) => number): number => median(ours.map((one, i) => of(one) / of(bare[i])));
    const latency = ratioOf(({ p95 }) => p95);
    const cpu = ratioOf((one) => one.cpu);
    const lost = 1 - Math.min(...ours.map(({ received }) => received));
    return {
      value: median(ours.map(({ p95 }) => p95)),
      unit: 'ms p95',
      ratio: latency,
      baseline: `a bare socket.io relay: p95 ${median(bare.map(({ p95 }) => p95)).toFixed(1)} ms, ${(100 * median(bare.map((one) => one.cpu))).toFixed(0)} % of a core`,
      goal: `p95 and CPU ≤ ${GOAL} × baseline`,
      met: latency <= GOAL && cpu <= GOAL && lost === 0,
      details: [
        { label: 'CPU against the baseline', value: cpu, unit: '×' },
        { label: 'CPU', value: 100 * median(ours.map((one) => one.cpu)), unit: '% of a core' },
        { label: 'median latency', value: median(ours.map(({ p50 }) => p50)), unit: 'ms' },
        { label: 'frames lost', value: 100 * lost, unit: '%' },
      ],
    };
  },
});

function frameOf(number: number): string {
  const channels = Array.from({ length: channelCount(2) }, (_, c) =>
    Int16Array.from({ length: FRAME_TICKS }, (_unused, i) =>
      c < 3 ? 100 * ((number + i) % 200) : 1000 * ((number >> 8) % 30),
    ),
  );
  for (let i = 0; i < FRAME_TICKS; i += 1) channels[3][i] = number % 32_000;
  return encodeFrame({
    branch: 0,
    startTick: 4,
    tickCount: FRAME_TICKS,
    engineCount: 2,
    channels: channels.map((c, k) => (k >= 6 ? new Int16Array(FRAME_TICKS) : c)),
    stateHash: null,
  });
}

async function classSide(cleanUp: BenchContext['cleanUp'], arrived: (frame: string) => void): Promise<Side> {
  const { server } = await startLoadProduct(cleanUp);
  const setup = { mode: 'demonstration', seats: VIEWERS, scenario: 'engine-cut-in-the-climb' } as const;
  const { pass, instructor } = await openLoadClass(server.address, setup, cleanUp);
  const crowd = await gatherCrowd(server.address, pass, VIEWERS, cleanUp);
  for (const { socket } of crowd) socket.on('run:inputs', ({ frame }) => arrived(frame));
  await instructor.control({ deed: 'start', countdownS: 0 });
  await until(() => instructor.state.run !== null);
  await instructor.takeControls(true);
  const attemptId = instructor.run.attempt ?? '';
  return {
    send: (frame) => void instructor.socket.emit('run:inputs', { classId: pass.classId, attemptId, frame }),
    cpuS: () => server.cpuS(),
  };
}

async function bareSide(cleanUp: BenchContext['cleanUp'], arrived: (frame: string) => void): Promise<Side> {
  const relay = await startRelay();
  cleanUp(() => relay.stop());
  const connect = async (): Promise<Socket> => {
    const socket = io(relay.address, { transports: ['websocket'], forceNew: true });
    cleanUp(() => socket.disconnect());
    await new Promise<void>((resolve) => socket.once('connect', () => resolve()));
    return socket;
  };
  for (let i = 0; i < VIEWERS; i += 1) {
    const viewer = await connect();
    viewer.on('frame', ({ frame }: { frame: string }) => arrived(frame));
  }
  const sender = await connect();
  const attemptId = '00000000-0000-4000-8000-000000000000';
  return { send: (frame) => void sender.emit('frame', { attemptId, frame }), cpuS: relay.cpuS };
}
