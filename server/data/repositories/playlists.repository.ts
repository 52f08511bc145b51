import { playlistListQuerySchema, type PlaylistListQuery } from '#shared/contracts/playlists.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { anywhere } from './like-pattern.ts';
import { offsetOf, type Rows, sortOrder } from './paging.ts';

const rowSchema = z.object({
  id: z.string(),
  name: z.string(),
  note: z.string(),
  version: z.number(),
  author: z.string(),
  changedBy: z.string(),
  changedAt: z.date(),
});
const itemSchema = z.object({
  playlistId: z.string(),
  scenarioId: z.string(),
  slug: z.string(),
  title: z.string(),
  durationS: z.number(),
  revisionId: z.string().nullable(),
  revision: z.number().nullable(),
});
const totalSchema = z.tuple([z.object({ total: z.coerce.number() })]);
export type PlaylistItemRecord = z.infer<typeof itemSchema>;
export type PlaylistRecord = z.infer<typeof rowSchema> & { items: PlaylistItemRecord[] };

/** A scenario that a slug names, at its latest published revision; without one it has none. */
const chosenSchema = z.object({
  slug: z.string(),
  scenarioId: z.string(),
  revisionId: z.string().nullable(),
  revision: z.number().nullable(),
  title: z.string(),
});
export type ChosenScenario = z.infer<typeof chosenSchema>;

const SELECT = `SELECT p.id, p.name, p.note, p.version, author.display_name AS author,
    changer.display_name AS changedBy, p.changed_at AS changedAt
  FROM playlist p
  INNER JOIN person author ON author.id = p.created_by
  INNER JOIN person changer ON changer.id = p.changed_by`;
const SORT: Record<string, string> = { name: 'p.name', changedAt: 'p.changed_at' };
/** The latest published revision of scenario `s`, and the latest of any kind but draft for its title. */
const LATEST = (status: string) =>
  `(SELECT MAX(n.number) FROM scenario_revision n WHERE n.scenario_id = s.id AND n.status ${status})`;

export function createPlaylistsRepository(manager: EntityManager) {
  const withItems = async (rows: z.infer<typeof rowSchema>[]): Promise<PlaylistRecord[]> => {
    if (rows.length === 0) return [];
    const found: unknown = await manager.query(
      `SELECT i.playlist_id AS playlistId, i.scenario_id AS scenarioId, s.slug, t.title, t.duration_s AS durationS,
         r.id AS revisionId, r.number AS revision
       FROM playlist_item i
       INNER JOIN scenario s ON s.id = i.scenario_id
       INNER JOIN scenario_revision t ON t.scenario_id = s.id AND t.number = ${LATEST(`<> 'draft'`)}
       LEFT JOIN scenario_revision r ON r.scenario_id = s.id AND r.number = ${LATEST(`= 'published'`)}
       WHERE i.playlist_id IN (?) ORDER BY i.playlist_id, i.position`,
      [rows.map((row) => row.id)],
    );
    const items = z.array(itemSchema).parse(found);
    return rows.map((row) => ({ ...row, items: items.filter((item) => item.playlistId === row.id) }));
  };

  return {
    async list(organisationId: string, query: PlaylistListQuery): Promise<Rows<PlaylistRecord>> {
      const { key, direction } = sortOrder(playlistListQuerySchema.shape.sort.parse(query.sort));
      const where = 'p.organisation_id = ? AND p.name LIKE ?';
      const values = [organisationId, anywhere(query.search)];
      const counted: unknown = await manager.query(`SELECT COUNT(*) AS total FROM playlist p WHERE ${where}`, values);
      const rows: unknown = await manager.query(
        `${SELECT} WHERE ${where} ORDER BY ${SORT[key]} ${direction}, p.id LIMIT ? OFFSET ?`,
        [...values, query.pageSize, offsetOf(query)],
      );
      return { items: await withItems(z.array(rowSchema).parse(rows)), total: totalSchema.parse(counted)[0].total };
    },

    async find(organisationId: string, id: string): Promise<PlaylistRecord | null> {
      const rows: unknown = await manager.query(`${SELECT} WHERE p.organisation_id = ? AND p.id = ?`, [
        organisationId,
        id,
      ]);
      const [found] = await withItems(z.array(rowSchema).parse(rows));
      return found ?? null;
    },

    async nameTaken(organisationId: string, name: string, besides: string | null): Promise<boolean> {
      const rows: unknown = await manager.query(
        'SELECT COUNT(*) AS total FROM playlist WHERE organisation_id = ? AND name = ? AND NOT (id <=> ?)',
        [organisationId, name, besides],
      );
      return totalSchema.parse(rows)[0].total > 0;
    },

    /** The scenarios that slugs name, in any order; unknown slugs and mere drafts are missing. */
    async choose(organisationId: string, slugs: readonly string[]): Promise<ChosenScenario[]> {
      if (slugs.length === 0) return [];
      const rows: unknown = await manager.query(
        `SELECT s.slug, s.id AS scenarioId, r.id AS revisionId, r.number AS revision, t.title
         FROM scenario s
         INNER JOIN scenario_revision t ON t.scenario_id = s.id AND t.number = ${LATEST(`<> 'draft'`)}
         LEFT JOIN scenario_revision r ON r.scenario_id = s.id AND r.number = ${LATEST(`= 'published'`)}
         WHERE s.organisation_id = ? AND s.slug IN (?)`,
        [organisationId, slugs],
      );
      return z.array(chosenSchema).parse(rows);
    },

    async insert(list: {
      id: string;
      organisationId: string;
      name: string;
      note: string;
      scenarioIds: readonly string[];
      by: string;
      at: Date;
    }): Promise<void> {
      const { id, organisationId, name, note, scenarioIds, by, at } = list;
      await manager.query(
        `INSERT INTO playlist (id, organisation_id, name, note, version, created_by, created_at, changed_by, changed_at)
         VALUES (?, ?, ?, ?, 1, ?, ?, ?, ?)`,
        [id, organisationId, name, note, by, at, by, at],
      );
      await insertItems(id, scenarioIds);
    },

    /** False when the playlist has been saved since `version`. */
    async save(
      id: string,
      version: number,
      content: { name: string; note: string; scenarioIds: readonly string[] },
      by: string,
      at: Date,
    ): Promise<boolean> {
      const done: unknown = await manager.query(
        `UPDATE playlist SET name = ?, note = ?, version = version + 1, changed_by = ?, changed_at = ?
         WHERE id = ? AND version = ?`,
        [content.name, content.note, by, at, id, version],
      );
      if (z.object({ affectedRows: z.number() }).parse(done).affectedRows === 0) return false;
      await manager.query('DELETE FROM playlist_item WHERE playlist_id = ?', [id]);
      await insertItems(id, content.scenarioIds);
      return true;
    },

    async remove(organisationId: string, id: string): Promise<void> {
      await manager.query('DELETE FROM playlist WHERE organisation_id = ? AND id = ?', [organisationId, id]);
    },
  };

  async function insertItems(id: string, scenarioIds: readonly string[]): Promise<void> {
    await manager.query('INSERT INTO playlist_item (playlist_id, position, scenario_id) VALUES ?', [
      scenarioIds.map((scenarioId, position) => [id, position + 1, scenarioId]),
    ]);
  }
}

export type PlaylistsRepository = ReturnType<typeof createPlaylistsRepository>;
