import { editionOf } from '#shared/contracts/edition.ts';

/** Header of an edit that holds only while the content is still what was read. */
export const ifStill = (read: unknown): Record<string, string> => ({ 'if-match': `"${editionOf(read)}"` });
