import process from 'node:process';
import { endRunningPrograms } from './programs.mjs';

/** Signals that end the product. SIGHUP: the terminal window was closed. */
const SIGNALS = /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP']);

/**
 * Stops what was started, last first, once, however often and by whatever it is asked: npm passes Ctrl-C on a
 * second time, and a server that ends by itself takes the rest with it.
 */
export class ShutDown {
  /** @type {{ name: string, action: () => unknown }[]} */
  #started = [];
  /** @type {Promise<void> | null} */
  #running = null;
  /** Whether a signal or the end of a part asked for it. */
  wanted = false;

  /** @param {(text: string) => void} say */
  constructor(say) {
    for (const signal of SIGNALS) {
      process.on(signal, () => {
        if (this.wanted) return;
        this.wanted = true;
        say('\nStopping …');
        void this.run(0);
      });
    }
  }

  /**
   * Registers how to stop something, as soon as it exists, ready or not.
   * @param {string} name
   * @param {() => unknown} action
   */
  add(name, action) {
    this.#started.push({ name, action });
    // Started while everything is being stopped: it must not outlive the rest.
    if (this.#running) void action();
  }

  /**
   * Ends everything when a part that should go on has ended.
   * @param {Promise<unknown>} ended
   * @param {string} sentence
   */
  when(ended, sentence) {
    void ended.then(() => {
      if (this.wanted || this.#running) return;
      this.wanted = true;
      console.error(`\n${sentence}`);
      void this.run(1);
    });
  }

  /** Leaves the start when the end was asked for meanwhile. */
  throwIfWanted() {
    if (this.wanted) throw new Error('stopped while starting');
  }

  /**
   * @param {number} exitCode
   * @returns {Promise<void>} never settles: the process ends
   */
  run(exitCode) {
    this.#running ??= this.#stopAll(exitCode);
    return this.#running;
  }

  /** @param {number} exitCode */
  async #stopAll(exitCode) {
    await endRunningPrograms();
    for (let part = this.#started.pop(); part; part = this.#started.pop()) {
      try {
        await part.action();
      } catch (error) {
        console.error(`Stopping the ${part.name} failed:`, error);
      }
    }
    process.exit(exitCode);
  }
}
