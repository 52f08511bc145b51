import { randomUUID } from 'node:crypto';
import type { z } from 'zod';
import type { Page } from '#shared/contracts/paging.ts';
import type { Playlist, PlaylistListQuery, savePlaylistSchema } from '#shared/contracts/playlists.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { PlaylistRecord } from '../../data/repositories/playlists.repository.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import { inWords, versionText } from '../versions.ts';

type PlaylistBody = z.output<typeof savePlaylistSchema>;

function playlistOf(record: PlaylistRecord): Playlist {
  return {
    id: record.id,
    name: record.name,
    note: record.note,
    scenarios: record.items.map(({ slug, title, revision, durationS }) => ({ slug, title, revision, durationS })),
    author: record.author,
    changedBy: record.changedBy,
    changedAt: record.changedAt.toISOString(),
    version: versionText(record.id, record.version),
  };
}

/** Playlists of an organisation, made and changed by instructors. */
export function createPlaylistsService({ database, now }: { database: Database; now: () => Date }) {
  const found = async (on: Repositories, actor: Actor, id: string): Promise<PlaylistRecord> => {
    const record = await on.playlists.find(actor.organisationId, id);
    if (record === null) throw notFound('playlist');
    return record;
  };

  /** The scenarios that a body names, in its order. */
  const chosen = async (on: Repositories, actor: Actor, body: PlaylistBody): Promise<string[]> => {
    const known = new Map(
      (await on.playlists.choose(actor.organisationId, body.scenarios)).map((entry) => [entry.slug, entry]),
    );
    return body.scenarios.map((slug, i) => {
      const entry = known.get(slug);
      if (entry === undefined || entry.revision === null) {
        throw new ProblemError('validation', `"${slug}" is not a published scenario.`, {
          errors: [
            {
              field: `/scenarios/${i}`,
              rule: 'published',
              message: `"${slug}" is not a published scenario`,
              remedy: 'Choose a published scenario, or publish this one first.',
            },
          ],
        });
      }
      return entry.scenarioId;
    });
  };

  const freeName = async (on: Repositories, actor: Actor, name: string, besides: string | null): Promise<void> => {
    if (!(await on.playlists.nameTaken(actor.organisationId, name, besides))) return;
    throw new ProblemError('validation', `Another playlist is called "${name}".`, {
      errors: [
        {
          field: '/name',
          rule: 'taken',
          message: `another playlist is called "${name}"`,
          remedy: 'Choose another name.',
        },
      ],
    });
  };

  const entry = (actor: Actor, caller: Caller, at: Date, deed: string, id: string, name: string) => ({
    organisationId: actor.organisationId,
    at,
    actorId: actor.personId,
    deed: `playlist.${deed}`,
    subjectKind: 'playlist',
    subjectId: id,
    detail: { name },
    address: caller.address,
  });

  return {
    async list(actor: Actor, query: PlaylistListQuery): Promise<Page<Playlist>> {
      requireDeed(actor, 'playlist.read');
      const { items, total } = await database.playlists.list(actor.organisationId, query);
      return { items: items.map(playlistOf), total, page: query.page, pageSize: query.pageSize };
    },

    async read(actor: Actor, id: string): Promise<Playlist> {
      requireDeed(actor, 'playlist.read');
      return playlistOf(await found(database, actor, id));
    },

    async create(actor: Actor, body: PlaylistBody, caller: Caller): Promise<Playlist> {
      requireDeed(actor, 'playlist.edit');
      const at = now();
      const id = randomUUID();
      const { organisationId, personId } = actor;
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(organisationId);
        await freeName(on, actor, body.name, null);
        const scenarioIds = await chosen(on, actor, body);
        const { name, note } = body;
        await on.playlists.insert({ id, organisationId, name, note, scenarioIds, by: personId, at });
        await on.audit.append(entry(actor, caller, at, 'created', id, name));
        return playlistOf(await found(on, actor, id));
      });
    },

    /** Saves over the version that was read. */
    async save(actor: Actor, id: string, version: string, body: PlaylistBody, caller: Caller): Promise<Playlist> {
      requireDeed(actor, 'playlist.edit');
      const at = now();
      return database.transaction(async (on) => {
        await on.organisations.takeTurn(actor.organisationId);
        const before = await found(on, actor, id);
        await freeName(on, actor, body.name, id);
        const scenarioIds = await chosen(on, actor, body);
        const content = { name: body.name, note: body.note, scenarioIds };
        const current = versionText(before.id, before.version) === version;
        if (!current || !(await on.playlists.save(id, before.version, content, actor.personId, at))) {
          throw new ProblemError(
            'changed-meanwhile',
            `${before.changedBy} saved this playlist on ${inWords(before.changedAt)}, after you opened it. Open it again.`,
          );
        }
        await on.audit.append(entry(actor, caller, at, 'saved', id, body.name));
        return playlistOf(await found(on, actor, id));
      });
    },

    /** Takes a playlist away; assignments made from it keep their scenarios. */
    async remove(actor: Actor, id: string, caller: Caller): Promise<void> {
      requireDeed(actor, 'playlist.edit');
      const at = now();
      await database.transaction(async (on) => {
        const { name } = await found(on, actor, id);
        await on.playlists.remove(actor.organisationId, id);
        await on.audit.append(entry(actor, caller, at, 'removed', id, name));
      });
    },
  };
}
export type PlaylistsService = ReturnType<typeof createPlaylistsService>;
