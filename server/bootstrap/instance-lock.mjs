import fs from 'node:fs';
import path from 'node:path';
import { identityOf, isRunning, stopProcess } from './processes.mjs';
import { codeOf, Refusal } from './refusal.mjs';

/**
 * @typedef {import('./processes.mjs').ProcessIdentity} ProcessIdentity
 * @typedef {object} Instance
 * @property {ProcessIdentity} launcher
 * @property {string | null} address null while it is still starting
 * @property {ProcessIdentity | null} server
 */

/**
 * One running product a data folder. The lock is a file that says who holds it; one whose holder is gone
 * (after kill −9, or a power cut) is taken over, and a server left behind by that holder is stopped first.
 */
export class InstanceLock {
  /** @param {string} dataFolder */
  constructor(dataFolder) {
    this.dataFolder = dataFolder;
    this.file = path.join(dataFolder, 'run', 'instance.json');
    /** @type {Instance} */
    this.mine = { launcher: identityOf(process.pid), address: null, server: null };
  }

  /** @returns {Promise<{ recovered: boolean }>} recovered: a dead holder's lock was taken over */
  async take() {
    let recovered = false;
    for (let attempt = 0; attempt < 5; attempt++) {
      if (this.#create()) return { recovered };
      const holder = readInstance(this.file);
      if (holder !== null && isRunning(holder.launcher)) throw this.#alreadyRunning(holder);
      if (holder?.server) await stopProcess(holder.server);
      fs.rmSync(this.file, { force: true });
      recovered = true;
    }
    throw new Refusal(
      `Several starts at once are competing for the data folder ${this.dataFolder}`,
      'wait a few seconds and start one again',
    );
  }

  /** @param {Partial<Instance>} change */
  update(change) {
    this.mine = { ...this.mine, ...change };
    const draft = `${this.file}.${process.pid}`;
    fs.writeFileSync(draft, JSON.stringify(this.mine), { mode: 0o600 });
    fs.renameSync(draft, this.file);
  }

  release() {
    fs.rmSync(this.file, { force: true });
  }

  /** Creates the lock with its content in one step; false when there is one already. */
  #create() {
    const draft = `${this.file}.${process.pid}`;
    fs.writeFileSync(draft, JSON.stringify(this.mine), { mode: 0o600 });
    try {
      fs.linkSync(draft, this.file);
      return true;
    } catch (error) {
      if (codeOf(error) === 'EEXIST') return false;
      throw error;
    } finally {
      fs.rmSync(draft, { force: true });
    }
  }

  /** @param {Instance} holder */
  #alreadyRunning(holder) {
    const where = holder.address === null ? 'and still starting' : `at ${holder.address}`;
    return new Refusal(
      `Sidewash is already running ${where} (process ${holder.launcher.pid}, data folder ${this.dataFolder})`,
      'use that one, or stop it with Ctrl-C in its window and start again',
    );
  }
}

/**
 * @param {string} file
 * @returns {Instance | null} null when it is gone or not readable as a lock
 */
export function readInstance(file) {
  try {
    const content = JSON.parse(fs.readFileSync(file, 'utf8'));
    return typeof content?.launcher?.pid === 'number' ? content : null;
  } catch {
    return null;
  }
}
