import fs from 'node:fs';

/**
 * A process that can be told from a later one with the same number.
 * @typedef {object} ProcessIdentity
 * @property {number} pid
 * @property {string | null} startTicks kernel start time from /proc; null where there is no /proc
 */

/**
 * @param {number} pid
 * @returns {{ state: string, startTicks: string } | null} null when there is no such process or no /proc
 */
function readStat(pid) {
  try {
    const text = fs.readFileSync(`/proc/${pid}/stat`, 'utf8');
    const fields = text.slice(text.lastIndexOf(')') + 2).split(' ');
    return { state: fields[0], startTicks: fields[19] };
  } catch {
    return null;
  }
}

/**
 * @param {number} pid
 * @returns {ProcessIdentity}
 */
export function identityOf(pid) {
  return { pid, startTicks: readStat(pid)?.startTicks ?? null };
}

/**
 * Whether that very process still works: a zombie, or another process that got its number, does not count.
 * @param {ProcessIdentity} identity
 */
export function isRunning(identity) {
  try {
    process.kill(identity.pid, 0);
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EPERM')) return false;
  }
  const stat = readStat(identity.pid);
  if (stat === null) return !fs.existsSync('/proc/self/stat');
  if (stat.state === 'Z' || stat.state === 'X') return false;
  return identity.startTicks === null || identity.startTicks === stat.startTicks;
}

/**
 * Asks a process to end, and ends it when it does not within the time.
 * @param {ProcessIdentity} identity
 * @param {{ signal?: NodeJS.Signals, graceMs?: number }} [options]
 * @returns {Promise<'gone' | 'stopped' | 'killed'>}
 */
export async function stopProcess(identity, { signal = 'SIGTERM', graceMs = 15_000 } = {}) {
  if (!isRunning(identity)) return 'gone';
  send(identity.pid, signal);
  if (await endsWithin(identity, graceMs)) return 'stopped';
  send(identity.pid, 'SIGKILL');
  await endsWithin(identity, 5_000);
  return 'killed';
}

/**
 * @param {number} pid
 * @param {NodeJS.Signals} signal
 */
function send(pid, signal) {
  try {
    process.kill(pid, signal);
  } catch {
    // it ended between the look and the signal
  }
}

/**
 * @param {ProcessIdentity} identity
 * @param {number} ms
 */
async function endsWithin(identity, ms) {
  const until = performance.now() + ms;
  while (performance.now() < until) {
    if (!isRunning(identity)) return true;
    await pause(40);
  }
  return !isRunning(identity);
}

/** @param {number} ms */
export function pause(ms) {
  return new Promise((resolve) => setTimeout(resolve, ms));
}

/**
 * Whether the promise settles within the time; leaves no timer behind.
 * @param {Promise<unknown>} promise
 * @param {number} ms
 * @returns {Promise<boolean>}
 */
export function settlesWithin(promise, ms) {
  return new Promise((resolve) => {
    const timer = setTimeout(() => resolve(false), ms);
    const settled = () => {
      clearTimeout(timer);
      resolve(true);
    };
    promise.then(settled, settled);
  });
}
