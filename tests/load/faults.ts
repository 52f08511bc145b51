/**
 * Faults in the middle of a class, one after another; each prints what was lost.
 * node --import tsx tests/load/faults.ts [--only NAME] [--kills 20] [--seed 1]
 */
import { setTimeout as delay } from 'node:timers/promises';
import { parseArgs } from 'node:util';
import { createStream } from '#shared/numerics/random.ts';
import { startRedis, startServerProcess } from '../support/server-process.ts';
import { startLoadProduct, type LoadProduct } from './crowd.ts';
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

function report(name: string, loss: Loss, more = ''): void {
  const lost = loss.entriesLost + loss.chunksLost + loss.attemptsThatDisagree + loss.membersWithAnotherLog;
  if (lost > 0) spoilt += 1;
  console.log(
    `${name}: ${loss.entriesAcknowledged} entries and ${loss.chunksAcknowledged} chunks acknowledged; lost: ` +
      `${loss.entriesLost} entries, ${loss.chunksLost} chunks; results that disagree: ${loss.attemptsThatDisagree}; ` +
      `members with another log: ${loss.membersWithAnotherLog}${more}`,
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
    const late = siege.lateness();
    report(`${kills} kills of one process`, await siege.account(), `; furthest from the class clock: ${late} ticks`);
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
    const late = siege.lateness();
    report(
      '300 ms and 10 % loss, clocks two minutes off',
      await siege.account(),
      `; furthest from the class clock: ${late} ticks`,
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
