import {
  playlistPageSchema,
  playlistSchema,
  type PlaylistListQuery,
  type SavePlaylist,
} from '#shared/contracts/playlists.ts';
import { api } from './http-client.ts';

const at = (id: string): string => `/api/playlists/${encodeURIComponent(id)}`;

export const listPlaylists = (query: Partial<PlaylistListQuery>, signal?: AbortSignal) =>
  api.get('/api/playlists', playlistPageSchema, { query, signal });

export const createPlaylist = (body: SavePlaylist) => api.post('/api/playlists', body, playlistSchema);

export const savePlaylist = (id: string, version: string, body: SavePlaylist) =>
  api.put(at(id), body, playlistSchema, { headers: { 'if-match': `"${version}"` } });

export const removePlaylist = (id: string): Promise<void> => api.delete(at(id));
