// Loaded before a server under test: on SIGUSR2 says how late its event loop was since the last time.
import { monitorEventLoopDelay } from 'node:perf_hooks';
import process from 'node:process';

const delay = monitorEventLoopDelay({ resolution: 5 });
delay.enable();
process.on('SIGUSR2', () => {
  const ms = (/** @type {number} */ ns) => ns / 1e6;
  console.log(`LOOP_DELAY ${JSON.stringify({ p99Ms: ms(delay.percentile(99)), maxMs: ms(delay.max) })}`);
  delay.reset();
});
