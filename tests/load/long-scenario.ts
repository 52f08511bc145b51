import fs from 'node:fs';
import path from 'node:path';
import { z } from 'zod';
import { projectFolder } from '../../server/bootstrap/paths.mjs';
import type { Client } from '../support/test-server.ts';

const placeSchema = z.object({ slug: z.string(), revision: z.number() });

/**
 * Publishes a flight that outlasts any fault: ten minutes of level flight in the twin jet with nothing planned.
 *
 * @param instructor  Signed in.
 * @returns           Its slug.
 */
export async function publishLongScenario(instructor: Client): Promise<string> {
  const file = path.join(projectFolder, 'scenarios', 'rudder-ratio-stuck.json');
  const document: unknown = {
    ...(JSON.parse(fs.readFileSync(file, 'utf8')) as object), // a scenario of the project
    title: 'Ten minutes level',
    duration_s: 600,
    events: [],
    criteria: [{ id: 'slip', title: 'Sideslip', measure: 'sideslip', limit: { max: 20, unit: 'deg' }, required: true }],
  };
  const drafted = await instructor('POST', '/api/scenarios', { json: { document } });
  const { slug, revision } = placeSchema.parse(drafted.body);
  const at = `/api/scenarios/${slug}/revisions/${revision}/publish`;
  const published = await instructor('POST', at, { json: { note: 'For load scripts.' } });
  if (published.status !== 200)
    throw new Error(`Publishing answered ${published.status}: ${JSON.stringify(published.body)}`);
  return slug;
}
