import { ADMINISTRATION_AREAS } from './administration-operations.ts';
import { BROWSER_AREAS } from './browser-operations.ts';
import { LIBRARY_AREAS } from './library-operations.ts';
import type { Area } from './operation.ts';
import { TRAINING_AREAS } from './training-operations.ts';

/** The whole interface, in the order in which it reads best. */
export const AREAS: readonly Area[] = [...LIBRARY_AREAS, ...TRAINING_AREAS, ...ADMINISTRATION_AREAS, ...BROWSER_AREAS];
