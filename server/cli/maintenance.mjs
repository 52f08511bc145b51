#!/usr/bin/env node
// Entry of `npm run backup`, `npm run restore` and `npm run audit:verify`: runs maintenance.ts from the sources.
import { register } from 'tsx/esm/api';

register();
const { maintain } = await import('./maintenance.ts');
process.exitCode = await maintain(process.argv.slice(2));
