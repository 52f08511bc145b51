/**
 * Faults in the middle of a class, one after another; each prints what was lost.
 * node --import tsx tests/load/faults.ts [--only NAME] [--kills 20] [--seed 1]
 */
import { setTimeout as delay } from 'node:timers/promises';
import { parseArgs } from 'node:util';
import { createStream } from '#shared/numerics/random.ts';
import { startRedis, startServerProcess } from '../support/server-process.ts';
import { startLoadProduct, type LoadProduct } from './crowd.ts';
import { openLossyNetwork } from './lossy-network.ts';
import { Siege, type Loss } from './siege.ts';
import { startSlowLink } from './slow-link.ts';

const { values } = parseArgs({
  options: { only: { type: 'string' }, kills: { type: 'string' }, seed: { type: 'string' } },
});
const kills = Number(values.kills ?? 20);
const seed = Number(values.seed ?? 1);
const stream = createStream(seed, 'faults');
const random = (): number => stream.uniform();
let spoilt = 0;

/** Ticks that an aeroplane may be from the class clock some seconds after a fault: the clock's measurement, not more. */
const LATEST_TICKS = 40;

function report(name: string, loss: Loss, more = ''): void {
  const lost =
    loss.entriesLost + loss.chunksLost + loss.attemptsThatDisagree + loss.attemptsMissing + loss.membersWithAnotherLog;
  const late = !(loss.latenessTicks <= LATEST_TICKS);
  if (lost > 0 || late || loss.chunksAcknowledged === 0) spoilt += 1;
  console.log(
    `${name}: ${loss.entriesAcknowledged} entries and ${loss.chunksAcknowledged} chunks acknowledged; lost: ` +
      `${loss.entriesLost} entries, ${loss.chunksLost} chunks; attempts without result: ${loss.attemptsMissing}, ` +
      `results that disagree: ${loss.attemptsThatDisagree}; members with another log: ${loss.membersWithAnotherLog}; ` +
      `furthest from the class clock: ${loss.latenessTicks} of ${LATEST_TICKS} ticks; run of ${loss.runS.toFixed(0)} s${more}`,
  );
}

type CleanUps = (() => unknown)[];
const faults: Record<string, (cleanUp: (action: () => unknown) => void) => Promise<void>> = {
  'kill-alone': async (cleanUp) => {
    const product = await startLoadProduct(cleanUp);
    const { server } = product;
    const siege = await begin(product, cleanUp, [server.address]);
    await siege.during(
      (async () => {
        for (let kill = 1; kill <= kills; kill += 1) {
          await delay(300 + 1500 * random());
          await server.kill();
          await delay(300 * random());
          await server.start();
        }
        await delay(4000);
      })(),
    );
    report(`${kills} kills of one process`, await siege.account());
  },

  'kill-several': async (cleanUp) => {
    const redis = await startRedis();
    if (redis === null) {
      console.log('kill-several: skipped, redis-server is not installed');
      return;
    }
    cleanUp(() => redis.stop());
    const product = await startLoadProduct(cleanUp, redis.url);
    const second = await startServerProcess({ databaseUrl: product.databaseUrl, redisUrl: redis.url });
    cleanUp(() => second.stop());
    const servers = [product.server, second];
    const siege = await begin(product, cleanUp, [second.address, product.server.address]);
    await siege.during(
      (async () => {
        for (let kill = 1; kill <= kills; kill += 1) {
          await delay(300 + 1500 * random());
          const victim = servers[Math.floor(random() * servers.length)];
          await victim.kill();
          await victim.start();
        }
        await redis.restart();
        await delay(4000);
      })(),
    );
    report(`${kills} kills of two processes and a restart of Redis`, await siege.account());
  },

  database: async (cleanUp) => {
    const product = await startLoadProduct(cleanUp);
    const siege = await begin(product, cleanUp, [product.server.address]);
    await siege.during(
      (async () => {
        await delay(3000);
        await product.restartDatabase();
        await delay(8000);
      })(),
    );
    report('MariaDB restarted', await siege.account());
  },

  'slow-link': async (cleanUp) => {
    const product = await startLoadProduct(cleanUp);
    const link = await startSlowLink(product.server.address, { delayMs: 150, lossShare: 0.1, random });
    cleanUp(() => link.stop());
    const siege = await begin(product, cleanUp, [link.address], [0, 120_000, -120_000]);
    await siege.during(delay(15_000));
    report('300 ms and 10 % loss as TCP shows them, clocks two minutes off', await siege.account());
  },

  network: async (cleanUp) => {
    const product = await startLoadProduct(cleanUp);
    const asked = { delayMs: 150, lossShare: 0.1, seed, seconds: 180 };
    const network = await openLossyNetwork(product.server.address, asked);
    if (network === null) {
      console.log('network: skipped; slow-link shows the same without rights');
      return;
    }
    cleanUp(() => network.stop());
    const siege = await begin(product, cleanUp, [network.address], [0, 120_000, -120_000]);
    await siege.during(delay(20_000));
    const loss = await siege.account();
    const { carried, lost } = network.counts();
    const share = ((100 * lost) / (carried + lost)).toFixed(1);
    report(
      'Packets 150 ms late each way and one in ten lost in a network of its own, clocks two minutes off',
      loss,
      `; ${carried} packets carried, ${lost} lost (${share} %)`,
    );
  },
};

async function begin(
  product: LoadProduct,
  cleanUp: (action: () => unknown) => void,
  addresses: string[],
  clockErrorsMs: number[] = [],
): Promise<Siege> {
  const siege = await Siege.begin(product, product.server.address, addresses, random, clockErrorsMs);
  cleanUp(() => siege.close());
  return siege;
}

console.log(`Seed ${seed}.`);
for (const [name, fault] of Object.entries(faults)) {
  if (values.only !== undefined && values.only !== name) continue;
  const cleanUps: CleanUps = [];
  try {
    await fault((action) => void cleanUps.unshift(action));
  } catch (error) {
    spoilt += 1;
    console.error(name, error);
  } finally {
    for (const action of cleanUps) await action();
  }
}
process.exit(spoilt > 0 ? 1 : 0);
