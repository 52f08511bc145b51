import crypto from 'node:crypto';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import process from 'node:process';
import { findProgram, lastLines, runProgram } from './programs.mjs';
import { Refusal } from './refusal.mjs';

/** Unix socket paths end at 107 bytes; mariadbd adds nothing to the one it is given. */
const LONGEST_SOCKET_PATH = 100;

/**
 * Where the private database keeps what.
 * @typedef {ReturnType<typeof mariadbPlaces>} MariadbPlaces
 * @param {string} dataFolder
 */
export function mariadbPlaces(dataFolder) {
  const run = path.join(dataFolder, 'run');
  const socket = path.join(run, 'mariadb.sock');
  const short = path.join(os.tmpdir(), `sidewash-${digest(dataFolder)}`, 'mariadb.sock');
  return {
    data: path.join(dataFolder, 'mariadb'),
    socket: Buffer.byteLength(socket) <= LONGEST_SOCKET_PATH ? socket : short,
    pidFile: path.join(run, 'mariadb.pid'),
    grants: path.join(run, 'mariadb-grants.sql'),
    client: path.join(run, 'mariadb-client.cnf'),
    log: path.join(dataFolder, 'logs', 'mariadb.log'),
    access: path.join(dataFolder, 'mariadb-access.json'),
  };
}

/** @param {string} text */
function digest(text) {
  return crypto.createHash('sha256').update(text).digest('hex').slice(0, 12);
}

/**
 * @typedef {object} Access
 * @property {string} user
 * @property {string} password
 * @property {string} database
 * @property {number} [port] the one used last
 */

/**
 * The private database's account; made with a random password the first time, readable by this user alone.
 * A lost file is no harm: each start grants anew what the file says.
 * @param {string} file
 * @returns {Access}
 */
export function readAccess(file) {
  try {
    const content = JSON.parse(fs.readFileSync(file, 'utf8'));
    if ([content.user, content.password, content.database].every((part) => /^[\w-]+$/.test(part))) return content;
  } catch {
    // missing or damaged: a new one
  }
  const access = { user: 'sidewash', password: crypto.randomBytes(24).toString('hex'), database: 'sidewash' };
  writeAccess(file, access);
  return access;
}

/**
 * @param {string} file
 * @param {Access} access
 */
export function writeAccess(file, access) {
  writeSecret(file, `${JSON.stringify(access)}\n`);
}

/**
 * The statements that the server runs before it lets anyone in, and the settings its client reads.
 * The account may do everything in databases whose names begin with "sidewash": tests make their own.
 * @param {MariadbPlaces} places
 * @param {Access} access
 * @param {number} port
 */
export function writeSecretFiles(places, { user, password, database }, port) {
  const accounts = ['127.0.0.1', 'localhost'].map((host) => `'${user}'@'${host}'`);
  const statements = [
    `CREATE DATABASE IF NOT EXISTS \`${database}\` CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci;`,
    ...accounts.flatMap((account) => [
      `CREATE USER IF NOT EXISTS ${account} IDENTIFIED BY '${password}';`,
      `ALTER USER ${account} IDENTIFIED BY '${password}';`,
      `GRANT ALL PRIVILEGES ON \`sidewash%\`.* TO ${account};`,
    ]),
  ];
  writeSecret(places.grants, `${statements.join('\n')}\n`);
  writeSecret(
    places.client,
    ['[client]', 'protocol=tcp', 'host=127.0.0.1', `port=${port}`, `user=${user}`, `password=${password}`, ''].join(
      '\n',
    ),
  );
}

/**
 * Makes the empty system tables the first time: beside their place, then renamed, so that a start that was cut off
 * leaves no half of them.
 * @param {MariadbPlaces} places
 * @param {(text: string) => void} say
 */
export async function createDatabaseFiles(places, say) {
  const me = process.geteuid?.();
  if (fs.existsSync(path.join(places.data, 'mysql'))) {
    const owner = fs.statSync(places.data).uid;
    if (me !== undefined && owner !== me) {
      throw new Refusal(
        `The database in ${places.data} belongs to another user (number ${owner}, this one is ${me})`,
        'start as that user, or name another folder with SIDEWASH_DATA',
      );
    }
    return;
  }
  const install = findProgram(['mariadb-install-db', 'mysql_install_db']);
  if (!install) {
    throw new Refusal(
      'mariadb-install-db was not found beside the database server',
      "install Debian's package mariadb-server-core and start again",
    );
  }
  say('Creating the database files (once) …');
  const drafts = `${places.data}.new-`;
  for (const name of fs.readdirSync(path.dirname(drafts))) {
    const left = path.join(path.dirname(drafts), name);
    if (left.startsWith(drafts)) fs.rmSync(left, { recursive: true, force: true });
  }
  // A name of its own: what a killed start left behind may still be writing into the other.
  const draft = fs.mkdtempSync(drafts);
  const args = [
    '--no-defaults',
    `--datadir=${draft}`,
    '--auth-root-authentication-method=socket',
    `--auth-root-socket-user=${userName()}`,
    '--skip-test-db',
    ...(me === 0 ? ['--user=root'] : []),
  ];
  const outcome = await runProgram(install, args, { ownGroup: true });
  if (outcome.code !== 0) {
    const full = /No space left|Errcode: 28|errno: 28/i.test(outcome.output);
    fs.rmSync(draft, { recursive: true, force: true });
    throw new Refusal(
      full ? `The disk under ${draft} is full` : `Creating the database files in ${places.data} failed`,
      full ? 'free some space there, or name another folder with SIDEWASH_DATA' : 'what it said stands above',
      full ? [] : lastLines(outcome.output, 8),
    );
  }
  fs.renameSync(draft, places.data);
}

/** This user's name; a number without a name (in some containers) counts as root of the socket account. */
function userName() {
  try {
    return os.userInfo().username;
  } catch {
    return 'root';
  }
}

/**
 * @param {string} file
 * @param {string} text
 */
function writeSecret(file, text) {
  fs.rmSync(file, { force: true });
  fs.writeFileSync(file, text, { mode: 0o600 });
}
