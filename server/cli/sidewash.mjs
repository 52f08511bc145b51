#!/usr/bin/env node
// Entry of the `sidewash` command: runs main.ts straight from the sources, no build step.
import { register } from 'tsx/esm/api';

// Whoever reads the output may stop early (`| head`): then there is nothing left to say.
for (const stream of [process.stdout, process.stderr]) {
  stream.on('error', (error) => {
    if (error.code === 'EPIPE') process.exit();
    throw error;
  });
}

register();
const { main } = await import('./main.ts');
process.exitCode = await main(process.argv.slice(2));
