import { z } from 'zod';
import { createdScenarioSchema, scenarioDraftSchema } from '#shared/contracts/scenario-editing.ts';
import { openClient } from '../support/test-server.ts';
import { jsonOf } from '../unit/scenario/support/build-scenario.ts';

/** Publishes a shipped scenario with other members, as an instructor would through the interface; its slug. */
export async function publishScenario(
  address: string,
  template: string,
  over: Record<string, unknown>,
): Promise<string> {
  const instructor = await openClient(address, 'm.okafor');
  const document = { ...z.record(z.string(), z.unknown()).parse(jsonOf(`scenarios/${template}.json`)), ...over };
  const made = await instructor('POST', '/api/scenarios', { json: { document } });
  const { slug } = createdScenarioSchema.parse(made.body);
  const { version } = scenarioDraftSchema.parse((await instructor('GET', `/api/scenarios/${slug}/drafts/1`)).body);
  const published = await instructor('POST', `/api/scenarios/${slug}/revisions/1/publish`, {
    json: { note: 'For the bench.' },
    headers: { 'if-match': `"${version}"` },
  });
  if (published.status >= 300) throw new Error(`Publishing answered ${published.status}.`);
  return slug;
}
