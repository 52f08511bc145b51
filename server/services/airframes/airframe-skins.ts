import { createHash } from 'node:crypto';
import { MAX_SKIN_BYTES } from '#shared/contracts/airframe-editing.ts';
import type { Database } from '../../data/database.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { airframeEntry, foundAirframe, lockedAirframe } from './airframe-deeds.ts';
import { checkGlb } from './glb-check.ts';

export interface StoredSkin {
  fileName: string;
  sha256: string;
  bytes: Buffer;
}

/** The optional model of an airframe. */
export function createAirframeSkins({ database, now }: { database: Database; now: () => Date }) {
  return {
    async read(actor: Actor, slug: string): Promise<StoredSkin> {
      requireDeed(actor, 'airframe.read');
      const airframe = await foundAirframe(database, actor, slug);
      const skin = await database.skins.find(airframe.id);
      if (skin === null) throw notFound('skin');
      return { fileName: skin.fileName, sha256: skin.sha256, bytes: await database.skins.bytes(airframe.id) };
    },

    async replace(
      actor: Actor,
      slug: string,
      upload: { fileName: string; bytes: Buffer },
      caller: Caller,
    ): Promise<{ bytes: number }> {
      requireDeed(actor, 'airframe.edit');
      const { fileName, bytes } = upload;
      if (bytes.length > MAX_SKIN_BYTES)
        throw new ProblemError(
          'too-large',
          `A skin has at most ${MAX_SKIN_BYTES / 1024 / 1024} MB. Simplify the model.`,
        );
      const checked = checkGlb(bytes);
      if (!checked.ok) {
        const error = { field: '', rule: 'model', message: checked.message, remedy: '' };
        throw new ProblemError('validation', checked.message, { errors: [error] });
      }
      const doing = { actor, caller, at: now() };
      const sha256 = createHash('sha256').update(bytes).digest('hex');
      await database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        const skin = { fileName, byteCount: bytes.length, sha256, uploadedAt: doing.at, bytes };
        await on.skins.replace(airframe.id, skin, actor.personId);
        await on.audit.append(airframeEntry(doing, 'skin-set', slug, { fileName, bytes: bytes.length, sha256 }));
      });
      return { bytes: bytes.length };
    },

    async remove(actor: Actor, slug: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'airframe.edit');
      const doing = { actor, caller, at: now() };
      await database.transaction(async (on) => {
        const airframe = await lockedAirframe(on, actor, slug);
        if (await on.skins.remove(airframe.id)) await on.audit.append(airframeEntry(doing, 'skin-removed', slug, {}));
      });
    },
  };
}
