/** A LIKE pattern that finds `text` anywhere, with its own wildcards taken literally. */
export function anywhere(text: string): string {
  return `%${text.replace(/[\\%_]/g, (character) => `\\${character}`)}%`;
}
