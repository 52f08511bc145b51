import { Foundation1764547200000 } from './1764547200000-foundation.ts';
import { Guards1764547200001 } from './1764547200001-guards.ts';

/** Migrations in the order in which they run. */
export const MIGRATIONS = [Foundation1764547200000, Guards1764547200001];
