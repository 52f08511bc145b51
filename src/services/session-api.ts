import { type Me, meSchema, type SignInBody } from '#shared/contracts/session.ts';
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
