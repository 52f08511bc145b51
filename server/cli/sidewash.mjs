#!/usr/bin/env node
// Entry of the `sidewash` command: runs main.ts straight from the sources, no build step.
import { register } from 'tsx/esm/api';

register();
const { main } = await import('./main.ts');
process.exitCode = await main(process.argv.slice(2));
