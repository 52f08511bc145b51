import { z } from 'zod';
import { setUpStateSchema, type SetUpBody } from '#shared/contracts/set-up.ts';
import { api } from './http-client.ts';

export const getSetUpState = (signal?: AbortSignal) => api.get('/api/set-up', setUpStateSchema, { signal });
export const setUp = (body: SetUpBody): Promise<undefined> => api.post('/api/set-up', body, z.undefined());
