/**
 * npm start, npm run dev: from a bare clone to the running product. Node's own modules only, because nothing else
 * is there yet. See README.md beside this file for the order of the steps.
 */
import process from 'node:process';
import { buildStale } from './builds.mjs';
import { prepareDataFolder } from './data-folder.mjs';
import { checkDatabaseAddress } from './database-address.mjs';
import { InstanceLock } from './instance-lock.mjs';
import { startMariadb } from './mariadb.mjs';
import { dataFolderOf, projectFolder } from './paths.mjs';
import { portIsFree } from './ports.mjs';
import { prepareTools } from './prepare.mjs';
import { startProduct } from './product.mjs';
import { printError, Refusal } from './refusal.mjs';
import { ShutDown } from './shut-down.mjs';
import { Timings } from './timings.mjs';
import { welcome } from './welcome.mjs';

const say = (/** @type {string} */ text) => console.log(text);
const dev = process.argv.includes('--dev');
const host = process.env.HOST || '127.0.0.1';
const port = readPort(process.env.PORT || '5180');
const externalDatabase = process.env.DATABASE_URL;
const dataFolder = dataFolderOf(process.env);
const timings = new Timings();
const shutDown = new ShutDown(say);

try {
  await start();
} catch (error) {
  if (!shutDown.wanted) printError('Sidewash did not start', error);
  await shutDown.run(shutDown.wanted ? 0 : 1);
}

async function start() {
  if (Number.isNaN(port)) throw new Refusal(`PORT=${process.env.PORT} is no port number`, 'use 1 to 65535');
  prepareDataFolder(dataFolder);
  const lock = new InstanceLock(dataFolder);
  const { recovered } = await lock.take();
  shutDown.add('lock', () => lock.release());
  if (recovered) say('The last run ended without stopping; taking over its data folder.');
  await checkPort();
  if (externalDatabase) await checkDatabaseAddress(externalDatabase);
  shutDown.throwIfWanted();

  await prepareTools(timings, say);
  const [databaseUrl] = await Promise.all([
    timings.step('database', prepareDatabase),
    dev ? null : timings.step('build', () => buildStale(projectFolder, say)),
  ]);
  shutDown.throwIfWanted();

  const product = await timings.step('server', () =>
    startProduct({
      projectFolder,
      dev,
      env: {
        ...process.env,
        NODE_ENV: dev ? 'development' : 'production',
        DATABASE_URL: databaseUrl,
        HOST: host,
        PORT: String(port),
        SIDEWASH_DATA: dataFolder,
        SIDEWASH_DEV: dev ? '1' : '0',
      },
      onSpawn: (server, stop) => {
        shutDown.add('server', stop);
        lock.update({ server });
      },
      print: say,
    }),
  );
  lock.update({ address: product.address });
  shutDown.throwIfWanted();
  shutDown.when(product.exited, 'The server ended by itself; its log is in the data folder (logs/server.log).');

  say(welcome(product.address, timings.sentence(), product.ready));
  timings.write(process.env.SIDEWASH_TIMINGS, { address: product.address });
}

async function prepareDatabase() {
  if (externalDatabase) return externalDatabase;
  const mariadb = await startMariadb({
    dataFolder,
    say,
    onSpawn: (server) => shutDown.add('database', () => server.stop()),
  });
  shutDown.when(mariadb.exited, 'The database ended by itself; its log is in the data folder (logs/mariadb.log).');
  return mariadb.url;
}

async function checkPort() {
  if (await portIsFree(host, port)) return;
  throw new Refusal(
    `Port ${port} on ${host} cannot be used; another program listens there or this user may not`,
    `stop that program, or choose another port, such as PORT=${port < 65_000 ? port + 1 : 5181} npm start`,
  );
}

/** @param {string} text */
function readPort(text) {
  const value = Number(text);
  return Number.isInteger(value) && value >= 1 && value <= 65_535 ? value : Number.NaN;
}
