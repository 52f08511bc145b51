import { createHash } from 'node:crypto';
import type { AuditCheck } from '#shared/contracts/administration.ts';
import type { Database } from '../../data/database.ts';

/** Entries are sealed when they are this old: by then every transaction that wrote one has ended. */
export const SEAL_AFTER_S = 30;
const AT_ONCE = 500;
/** What the first entry is joined to. */
const BEGINNING = '0'.repeat(64);

/** Digest of an entry: SHA-256 over the digest before it, a line feed, and its content. Hexadecimal. */
export function sealOf(before: string | null, content: string): string {
  return createHash('sha256')
    .update(`${before ?? BEGINNING}\n${content}`)
    .digest('hex');
}

export function createAuditChain({ database, now }: { database: Database; now: () => Date }) {
  return {
    /** Seals what has become old enough, in the order of writing. @returns how many */
    async seal(): Promise<number> {
      return database.transaction(async (on) => {
        let before = await on.audit.lastSeal();
        const entries = await on.audit.unsealed(new Date(now().getTime() - SEAL_AFTER_S * 1000), AT_ONCE);
        if (entries.length === 0) return 0;
        const seals = entries.map(({ id, content }) => {
          before = sealOf(before, content);
          return { entryId: id, digest: before };
        });
        await on.audit.seal(seals, now());
        return seals.length;
      });
    },

    /** Recomputes the whole chain, of all organisations, without changing anything. */
    async check(progress: (done: number) => void = () => {}): Promise<AuditCheck> {
      let before: string | null = null;
      let after = '0';
      let sealed = 0;
      for (;;) {
        const rows = await database.audit.chain(after, AT_ONCE);
        for (const { position, id, content, digest } of rows) {
          const broken = (words: string): AuditCheck => ({
            sealed,
            waiting: 0,
            lastSeal: before,
            firstBreak: { id, words },
          });
          if (content === null) return broken('The entry is gone.');
          if (sealOf(before, content) !== digest) {
            return broken('The entry, or the one sealed before it, is not what was sealed.');
          }
          before = digest;
          after = position;
          sealed++;
        }
        progress(sealed);
        if (rows.length < AT_ONCE) {
          return { sealed, waiting: await database.audit.countUnsealed(), lastSeal: before, firstBreak: null };
        }
      }
    },
  };
}
export type AuditChain = ReturnType<typeof createAuditChain>;
