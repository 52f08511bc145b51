import type { EntityManager } from 'typeorm';
import { AirframeSkinPartEntity } from '../entities/airframe-skin-part.entity.ts';
import { AirframeSkinEntity } from '../entities/airframe-skin.entity.ts';

export interface SkinRecord {
  fileName: string;
  byteCount: number;
  sha256: string;
  uploadedAt: Date;
}

const PART_BYTES = 1024 * 1024;

export function createSkinsRepository(manager: EntityManager) {
  return {
    async find(airframeId: string): Promise<SkinRecord | null> {
      const row = await manager.findOne(AirframeSkinEntity, { where: { airframeId } });
      if (row === null) return null;
      const { fileName, byteCount, sha256, uploadedAt } = row;
      return { fileName, byteCount, sha256, uploadedAt };
    },

    async bytes(airframeId: string): Promise<Buffer> {
      const parts = await manager.find(AirframeSkinPartEntity, { where: { airframeId }, order: { index: 'ASC' } });
      return Buffer.concat(parts.map((part) => part.bytes));
    },

    async replace(airframeId: string, skin: SkinRecord & { bytes: Buffer }, by: string): Promise<void> {
      const held = await manager.exists(AirframeSkinEntity, { where: { airframeId } });
      if (held) await manager.delete(AirframeSkinEntity, { airframeId });
      const { bytes, ...record } = skin;
      await manager.insert(AirframeSkinEntity, { ...record, airframeId, uploadedById: by });
      for (let index = 0; index * PART_BYTES < bytes.length; index++) {
        const part = bytes.subarray(index * PART_BYTES, (index + 1) * PART_BYTES);
        await manager.insert(AirframeSkinPartEntity, { airframeId, index, bytes: part });
      }
    },

    /** False when there was none. */
    async remove(airframeId: string): Promise<boolean> {
      return ((await manager.delete(AirframeSkinEntity, { airframeId })).affected ?? 0) > 0;
    },
  };
}

export type SkinsRepository = ReturnType<typeof createSkinsRepository>;
