/** Playlists: published scenarios in the order in which a class or an assignment takes them. */
import { z } from 'zod';
import { bothWays, pageOf, pageQueryShape, searchShape, slugSchema } from './paging.ts';

export const LONGEST_PLAYLIST = 60;

export const savePlaylistSchema = z.strictObject({
  name: z.string().trim().min(1, 'A playlist has a name.').max(120, 'A name of a playlist has at most 120 characters.'),
  note: z.string().trim().max(2000, 'A note has at most 2,000 characters.').default(''),
  /** Scenarios in order, each once. */
  scenarios: z
    .array(slugSchema)
    .min(1, 'A playlist has at least one scenario.')
    .max(LONGEST_PLAYLIST, `A playlist has at most ${LONGEST_PLAYLIST} scenarios.`)
    .refine((slugs) => new Set(slugs).size === slugs.length, 'Each scenario stands in a playlist once.'),
});
export type SavePlaylist = z.input<typeof savePlaylistSchema>;

export const playlistScenarioSchema = z.object({
  slug: slugSchema,
  title: z.string(),
  /** The latest published revision; null when none is published any more. */
  revision: z.number().int().min(1).nullable(),
  durationS: z.number().positive(),
});
export type PlaylistScenario = z.infer<typeof playlistScenarioSchema>;

export const playlistSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  note: z.string(),
  scenarios: z.array(playlistScenarioSchema),
  author: z.string(),
  changedBy: z.string(),
  changedAt: z.iso.datetime(),
  /** For If-Match. */
  version: z.string(),
});
export type Playlist = z.infer<typeof playlistSchema>;

export const playlistListQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  sort: z.enum(bothWays(['name', 'changedAt'])).default('name'),
});
export type PlaylistListQuery = z.infer<typeof playlistListQuerySchema>;
export const playlistPageSchema = pageOf(playlistSchema);
