import fs from 'node:fs';

/** How long each step took, for the reader, and as a file for the bench row warm-start (SIDEWASH_TIMINGS=FILE). */
export class Timings {
  constructor() {
    this.start = performance.now();
    /** @type {{ name: string, ms: number }[]} */
    this.steps = [];
  }

  /**
   * @template T
   * @param {string} name
   * @param {() => T | Promise<T>} action
   * @returns {Promise<T>}
   */
  async step(name, action) {
    const from = performance.now();
    try {
      return await action();
    } finally {
      this.steps.push({ name, ms: Math.round(performance.now() - from) });
    }
  }

  totalMs() {
    return Math.round(performance.now() - this.start);
  }

  sentence() {
    const parts = this.steps.map((step) => `${step.name} ${seconds(step.ms)}`);
    return `Ready in ${seconds(this.totalMs())} (${parts.join(', ')}).`;
  }

  /**
   * @param {string | undefined} file
   * @param {Record<string, unknown>} more
   */
  write(file, more) {
    if (file) fs.writeFileSync(file, JSON.stringify({ totalMs: this.totalMs(), steps: this.steps, ...more }));
  }
}

/** @param {number} ms */
export function seconds(ms) {
  return ms < 9_950 ? `${(ms / 1000).toFixed(1)} s` : `${Math.round(ms / 1000)} s`;
}
