import { type Health, healthSchema } from '#shared/contracts/health.ts';
import { api } from './http-client.ts';

export const fetchHealth = (): Promise<Health> => api.get('/api/health', healthSchema);
