import type { Database } from '../../data/database.ts';
import type { DeliveryRecord, EndpointRecord } from '../../data/repositories/statements.repository.ts';
import type { Secrets } from './secrets.ts';

const AT_ONCE = 20;
const LEASE_S = 120;
const WITHIN_MS = 15_000;
const FIRST_PAUSE_MS = 5_000;
const LONGEST_PAUSE_MS = 3600_000;

type Outcome = { state: 'sent' | 'refused'; problem: string } | { state: 'later'; problem: string };

/**
 * Takes waiting statements to the endpoint. Each goes by PUT under its own identifier: when an answer is lost and it is
 * sent again, the endpoint knows it already and stores nothing twice.
 */
export function createDeliverStatements(setup: { database: Database; secrets: Secrets; now: () => Date }) {
  const { database, secrets, now } = setup;

  const send = async (endpoint: EndpointRecord, delivery: DeliveryRecord): Promise<Outcome> => {
    const secret = endpoint.secret === '' ? '' : secrets.open(endpoint.secret);
    if (secret === null) return { state: 'later', problem: 'The stored secret cannot be read; enter it again.' };
    const address = `${endpoint.address.replace(/\/+$/, '')}/statements?statementId=${delivery.id}`;
    const headers: Record<string, string> = {
      'content-type': 'application/json',
      'x-experience-api-version': '1.0.3',
    };
    if (endpoint.userName !== '' || secret !== '') {
      headers['authorization'] = `Basic ${Buffer.from(`${endpoint.userName}:${secret}`).toString('base64')}`;
    }
    let status: number;
    try {
      const answer = await fetch(address, {
        method: 'PUT',
        headers,
        body: JSON.stringify(delivery.statement),
        redirect: 'error',
        signal: AbortSignal.timeout(WITHIN_MS),
      });
      await answer.body?.cancel();
      status = answer.status;
    } catch (error) {
      const cause = error instanceof Error && error.cause instanceof Error ? error.cause.message : '';
      return { state: 'later', problem: `No answer: ${cause || (error instanceof Error ? error.message : 'unknown')}` };
    }
    if (status >= 200 && status < 300) return { state: 'sent', problem: '' };
    if (status === 409) return { state: 'sent', problem: 'The endpoint had it already.' };
    // Wrong credentials and a busy or broken endpoint can mend; what it finds wrong with a statement cannot.
    if (status === 401 || status === 403 || status === 404 || status === 408 || status === 429 || status >= 500) {
      return { state: 'later', problem: `The endpoint answered ${status}.` };
    }
    return { state: 'refused', problem: `The endpoint answered ${status}.` };
  };

  /** Delivers what is due; returns how many arrived. Safe to call from several servers at once. */
  return async (): Promise<number> => {
    const claimed = await database.transaction((on) => on.statements.claim(now(), LEASE_S, AT_ONCE));
    let sent = 0;
    for (const delivery of claimed) {
      const endpoint = await database.statements.endpoint(delivery.organisationId);
      if (endpoint === null || !endpoint.active) continue;
      const outcome = await send(endpoint, delivery);
      if (outcome.state === 'later') {
        const pause = Math.min(LONGEST_PAUSE_MS, FIRST_PAUSE_MS * 2 ** Math.min(delivery.tries, 20));
        await database.statements.postpone(delivery.id, new Date(now().getTime() + pause), outcome.problem);
      } else {
        await database.statements.settle(delivery.id, outcome.state, outcome.problem, now());
        if (outcome.state === 'sent') sent++;
      }
    }
    return sent;
  };
}
