/** Versions of small things that have no counter: made of their content, alike on both sides. */

function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`;
  if (typeof value !== 'object' || value === null) return JSON.stringify(value) ?? 'null';
  const members = Object.entries(value).filter(([, member]) => member !== undefined);
  return `{${members
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([name, member]) => `${JSON.stringify(name)}:${canonical(member)}`)
    .join(',')}}`;
}

/** Version of a content, for ETag and If-Match: 16 hex digits, the same for the same members in any order. */
export function editionOf(value: unknown): string {
  let a = 0xdeadbeef;
  let b = 0x41c6ce57;
  for (const letter of canonical(value)) {
    const code = letter.codePointAt(0) ?? 0;
    a = Math.imul(a ^ code, 0x9e3779b1);
    b = Math.imul(b ^ code, 0x5f356495);
  }
  a = Math.imul(a ^ (a >>> 16), 0x85ebca6b) ^ Math.imul(b ^ (b >>> 13), 0xc2b2ae35);
  b = Math.imul(b ^ (b >>> 16), 0x85ebca6b) ^ Math.imul(a ^ (a >>> 13), 0xc2b2ae35);
  const hex = (word: number): string => (word >>> 0).toString(16).padStart(8, '0');
  return hex(a) + hex(b);
}
