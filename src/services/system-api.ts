import { systemStateSchema } from '#shared/contracts/system.ts';
import { api } from './http-client.ts';

export const getSystemState = (signal?: AbortSignal) => api.get('/api/system', systemStateSchema, { signal });
