import {
  cellSchema,
  distributionSchema,
  endpointEdited,
  type Endpoint,
  endpointSchema,
  matrixSchema,
  queuedSchema,
  recordChoicesSchema,
  retentionEffectSchema,
  retentionSchema,
  totalsSchema,
  type MatrixQuery,
  type NewCorrection,
  type RecordFilter,
  type Retention,
  type SaveEndpoint,
} from '#shared/contracts/records.ts';
import { api } from './http-client.ts';
import { ifStill } from './if-still.ts';

export const getMatrix = (query: Partial<MatrixQuery>, signal?: AbortSignal) =>
  api.get('/api/records/matrix', matrixSchema, { query, signal });

export const getTotals = (query: Partial<MatrixQuery>, signal?: AbortSignal) =>
  api.get('/api/records/totals', totalsSchema, { query, signal });

export const getRecordChoices = (signal?: AbortSignal) =>
  api.get('/api/records/choices', recordChoicesSchema, { signal });

export const getCell = (person: string, scenario: string, signal?: AbortSignal) =>
  api.get('/api/records/cell', cellSchema, { query: { person, scenario }, signal });

export const getDistribution = (scenario: string, filter: Partial<RecordFilter>, signal?: AbortSignal) =>
  api.get('/api/records/distribution', distributionSchema, { query: { ...filter, scenario }, signal });

export const correctRecord = (attemptId: string, body: NewCorrection) =>
  api.post(`/api/records/attempts/${encodeURIComponent(attemptId)}/corrections`, body, cellSchema);

export const getEndpoint = (signal?: AbortSignal) => api.get('/api/records/endpoint', endpointSchema, { signal });
export const saveEndpoint = (body: SaveEndpoint, read: Endpoint) =>
  api.put('/api/records/endpoint', body, endpointSchema, { headers: ifStill(endpointEdited(read)) });
export const pushStatements = () => api.post('/api/records/endpoint/push', undefined, queuedSchema);
export const getRetention = (signal?: AbortSignal) => api.get('/api/records/retention', retentionSchema, { signal });
export const saveRetention = (body: Retention, read: Retention) =>
  api.put('/api/records/retention', body, retentionSchema, { headers: ifStill(read) });
export const getRetentionEffect = (body: Retention) =>
  api.post('/api/records/retention/effect', body, retentionEffectSchema);

/** Address of a file of records with the filters of the screen. */
export function recordFile(
  name: 'table.csv' | 'table.xlsx' | 'statements.json',
  { search, cohort, playlist, from, to, deactivated }: RecordFilter,
): string {
  const query = new URLSearchParams();
  for (const [key, value] of Object.entries({ search, cohort, playlist, from, to, deactivated })) {
    if (value !== undefined && value !== '') query.set(key, value);
  }
  return `/api/records/${name}?${query.toString()}`;
}
export const transcriptAddress = (personId: string): string =>
  `/api/records/people/${encodeURIComponent(personId)}/transcript.pdf`;
export const OWN_DATA_ADDRESS = '/api/records/mine/data.json';
