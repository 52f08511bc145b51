import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { createApp, type AppSetup } from './app.ts';
import { ConfigurationError, readEnvironment } from './config/environment.ts';
import { createLog } from './config/log.ts';
import { PROGRAM_VERSION } from './config/program-version.ts';
import { projectFolder } from './config/project-folder.ts';
import { tokenSecret } from './config/token-secret.ts';
import { openDatabase } from './data/database.ts';
import { seedEmptyDatabase } from './data/seeds/seed-empty-database.ts';
import { staticFiles } from './http/static-files.ts';
import { createCourier } from './mail/courier.ts';
import { startLocalSink } from './mail/local-sink.ts';
import { connectRedis } from './realtime/redis.ts';
import { attachSockets } from './realtime/sockets.ts';
import { createServices } from './services/create-services.ts';

const TIDY_EVERY_MS = 3600 * 1000;
const REMIND_EVERY_MS = 60 * 1000;
const DELIVER_EVERY_MS = 5 * 1000;
const MAIL_EVERY_MS = 2 * 1000;
const SEAL_EVERY_MS = 10 * 1000;

/** Starts the product's server: schema, seed, listen; prints one line for the launcher when it serves. */
async function main(): Promise<void> {
  const env = readEnvironment(process.env);
  const log = createLog(env);
  const { database, migrations } = await openDatabase({ url: env.databaseUrl, connections: env.databaseConnections });
  let address = env.publicOrigins[0] ?? '';
  const redis = env.redisUrl === null ? null : await connectRedis(env.redisUrl, log);
  const sink = env.smtpUrl === null ? await startLocalSink(path.join(env.dataFolder, 'mail')) : null;
  const courier = createCourier(sink?.url ?? env.smtpUrl ?? '', env.mailFrom);
  const services = createServices({
    database,
    mailRoute: () => ({
      server: env.smtpUrl === null ? null : new URL(env.smtpUrl).host,
      sinkFolder: sink?.folder ?? null,
    }),
    surroundings: () => ({ dataFolder: env.dataFolder, pingRedis: redis === null ? null : () => redis.ping() }),
    tokenSecret: tokenSecret(env.jwtSecret, env.dataFolder),
    address: () => address,
  });
  const seed = env.demonstration
    ? await seedEmptyDatabase({
        database,
        folder: path.join(projectFolder, 'scenarios'),
        hashPassword: services.passwords.hash,
        now: () => new Date(),
      })
    : { seeded: false, problems: [] };
  for (const problem of seed.problems) {
    log.warn(problem);
    console.error(problem);
  }

  const http = createServer();
  let closeClient = async (): Promise<void> => {};
  let client: AppSetup['client'];
  if (env.dev) {
    const { createServer: createVite } = await import('vite');
    const vite = await createVite({
      root: projectFolder,
      server: { middlewareMode: true, ws: { server: http } },
      appType: 'spa',
    });
    client = vite.middlewares;
    closeClient = () => vite.close();
  } else client = staticFiles(path.join(projectFolder, 'dist', 'client'));

  const app = createApp({ services, log, env, client });
  http.on('request', (request, response) => void app(request, response));
  const { sessions, classes } = services;
  const sockets = attachSockets({ http, sessions, classes, log, publicOrigins: env.publicOrigins, redis });
  await new Promise<void>((resolve, reject) => {
    http.once('error', reject);
    http.listen(env.port, env.host, resolve);
  });
  const clocks = [
    everySoOften(TIDY_EVERY_MS, 'tidy', () => services.sessions.tidy()),
    everySoOften(TIDY_EVERY_MS, 'retention', () => services.records.applyRetention()),
    everySoOften(REMIND_EVERY_MS, 'reminders', () => services.assignments.giveDueReminders()),
    everySoOften(DELIVER_EVERY_MS, 'statements', () => services.records.deliver()),
    everySoOften(MAIL_EVERY_MS, 'mail', () => services.sendMail(courier)),
    everySoOften(SEAL_EVERY_MS, 'audit seals', () => services.auditChain.seal()),
  ];

  function everySoOften(everyMs: number, what: string, work: () => Promise<unknown>): NodeJS.Timeout {
    let running = false;
    const timer = setInterval(() => {
      if (running) return;
      running = true;
      work()
        .catch((error: unknown) => log.error({ err: error }, `${what} failed`))
        .finally(() => (running = false));
    }, everyMs);
    return timer.unref();
  }

  let stopping = false;
  const stop = async (): Promise<void> => {
    if (stopping) return;
    stopping = true;
    for (const clock of clocks) clearInterval(clock);
    await sockets.close();
    http.closeAllConnections();
    await closeClient();
    await services.close();
    courier.close();
    await sink?.close();
    await database.close();
    log.info('stopped');
    process.exit(0);
  };
  process.on('SIGTERM', () => void stop());
  process.on('SIGINT', () => void stop());

  const { port } = http.address() as AddressInfo; // it listens on a port, not on a pipe
  const host = env.host === '0.0.0.0' || env.host === '::' ? 'localhost' : env.host;
  address = env.publicOrigins[0] ?? `http://${host.includes(':') ? `[${host}]` : host}:${port}`;
  log.info({ address, version: PROGRAM_VERSION, migrations, seeded: seed.seeded }, 'serving');
  const ready = {
    ...{ address, version: PROGRAM_VERSION, migrations: migrations.length },
    ...{ seeded: seed.seeded, problems: seed.problems.length },
    demonstration: await database.organisations.demonstration(),
    /** Opens the first set-up from another machine; null when there is nothing to set up. */
    setUpCode: await services.setUp.code(),
  };
  console.log(`SIDEWASH_READY ${JSON.stringify(ready)}`);
}

main().catch((error: unknown) => {
  if (error instanceof ConfigurationError) for (const sentence of error.sentences) console.error(sentence);
  else console.error(error instanceof Error ? (error.stack ?? error.message) : error);
  process.exit(1);
});
