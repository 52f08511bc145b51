import { openSessionsSchema, type NewAddress, type ProfileBody } from '#shared/contracts/account.ts';
import { type Me, meSchema, type SignInBody } from '#shared/contracts/session.ts';
import { z } from 'zod';
import { isApiError } from './api-error.ts';
import { api } from './http-client.ts';

export const signIn = (body: SignInBody): Promise<Me> => api.post('/api/session', body, meSchema);

export const signOut = (): Promise<undefined> => api.delete('/api/session');

/** Who is signed in here, or null when nobody is. */
export async function fetchMe(): Promise<Me | null> {
  try {
    return await api.get('/api/session', meSchema);
  } catch (error) {
    if (isApiError(error) && error.status === 401) return null;
    throw error;
  }
}

export const saveProfile = (body: ProfileBody): Promise<Me> => api.put('/api/session/profile', body, meSchema);
export const askNewAddress = (body: NewAddress): Promise<undefined> =>
  api.post('/api/session/address', body, z.undefined());
export const confirmAddress = (token: string): Promise<undefined> =>
  api.post('/api/session/link/confirm', { token }, z.undefined());

/** Sessions open in one's own name, or for an administrator in another's. */
const sessionsPath = (personId: string | null): string =>
  personId === null ? '/api/session/open' : `/api/people/${encodeURIComponent(personId)}/sessions`;
export const listSessions = (personId: string | null, signal?: AbortSignal) =>
  api.get(sessionsPath(personId), openSessionsSchema, { signal });
export const endSession = (personId: string | null, id: string): Promise<undefined> =>
  api.delete(`${sessionsPath(personId)}/${encodeURIComponent(id)}`);
