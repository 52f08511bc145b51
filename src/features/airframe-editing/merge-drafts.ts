/** Two engineers' versions of one draft against the version both began from: what each changed, and both together. */
import { pointerParts, valueAtPointer, withValue, type Json } from './draft-document.ts';

export interface DraftComparison {
  /** Members that only this page changed. */
  mine: readonly string[];
  /** Members that only the other engineer changed. */
  theirs: readonly string[];
  /** Members that both changed to different values: one has to be chosen. */
  both: readonly { pointer: string; base: Json | undefined; mine: Json | undefined; theirs: Json | undefined }[];
}
export type Side = 'mine' | 'theirs';

const isTree = (value: Json | undefined): value is readonly Json[] | { readonly [name: string]: Json } =>
  value !== null && typeof value === 'object';
const same = (a: Json | undefined, b: Json | undefined): boolean => a === b || JSON.stringify(a) === JSON.stringify(b);
const step = (name: string): string => `/${name.replaceAll('~', '~0').replaceAll('/', '~1')}`;
const contains = (outer: string, inner: string): boolean => inner === outer || inner.startsWith(`${outer}/`);

/** Changed members; a list whose length changed counts as one member, since its places no longer mean the same. */
export function changedMembers(base: Json | undefined, now: Json | undefined, at = ''): string[] {
  if (same(base, now)) return [];
  if (!isTree(base) || !isTree(now) || Array.isArray(base) !== Array.isArray(now)) return [at];
  if (Array.isArray(base) && Array.isArray(now) && base.length !== now.length) return [at];
  const names = new Set([...Object.keys(base), ...Object.keys(now)]);
  return [...names].flatMap((name) =>
    changedMembers(valueAtPointer(base, step(name)), valueAtPointer(now, step(name)), at + step(name)),
  );
}

/** What each side changed since `base`. */
export function compareDrafts(base: Json, mine: Json, theirs: Json): DraftComparison {
  const byMe = changedMembers(base, mine);
  const byThem = changedMembers(base, theirs);
  const touching = [...byMe, ...byThem].filter((pointer) =>
    (byMe.includes(pointer) ? byThem : byMe).some((other) => contains(pointer, other)),
  );
  const shared = [...new Set(touching)].filter(
    (pointer) => !touching.some((other) => other !== pointer && contains(other, pointer)),
  );
  const outside = (pointer: string): boolean => !shared.some((one) => contains(one, pointer));
  return {
    mine: byMe.filter(outside),
    theirs: byThem.filter(outside),
    both: shared
      .map((pointer) => ({
        pointer,
        base: valueAtPointer(base, pointer),
        mine: valueAtPointer(mine, pointer),
        theirs: valueAtPointer(theirs, pointer),
      }))
      .filter((one) => !same(one.mine, one.theirs)),
  };
}

/** Their version with my changes in it; `choice` decides where both changed the same member. */
export function mergeDrafts(
  mine: Json,
  theirs: Json,
  comparison: DraftComparison,
  choice: (pointer: string) => Side,
): Json {
  const taken = [
    ...comparison.mine,
    ...comparison.both.map(({ pointer }) => pointer).filter((pointer) => choice(pointer) === 'mine'),
  ];
  return taken.reduce((document, pointer) => withValue(document, pointer, valueAtPointer(mine, pointer)), theirs);
}

/** A member in words: its path without signs. */
export const memberWords = (pointer: string): string =>
  pointer === '' ? 'the whole document' : pointerParts(pointer).join(', ').replaceAll('_', ' ');

/** A value in a few words, for reading beside another. */
export function valueWords(value: Json | undefined): string {
  if (value === undefined) return 'not given';
  if (isTree(value)) return Array.isArray(value) ? `${value.length} entries` : `${Object.keys(value).length} members`;
  return value === null ? 'empty' : String(value);
}
