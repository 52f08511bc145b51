/** Words for how a flight ended and what counted. */
import type { CriterionResult, EndReason } from '#shared/scenario/run-types.ts';
import type { DeliveryStatus } from '../../runner/record/delivery-types.ts';

export function endWords(ended: EndReason, durationS: number, detail: string | null = null): string {
  const after = `after ${durationS.toFixed(1)} s`;
  switch (ended) {
    case 'completed':
      return `Flown to the end, ${durationS.toFixed(1)} s`;
    case 'touchdown':
      return `Touched down ${after}`;
    case 'ground':
      return `Reached the ground ${after}`;
    case 'non-finite':
      return `Stopped ${after}: ${detail ?? 'the model left its numbers'}. The recording is kept up to there`;
    case 'left':
      return `Left ${after}`;
  }
}

/** "2 of 5 criteria not met", "All 4 criteria met". */
export function countWords(
  criteria: readonly Pick<CriterionResult, 'verdict' | 'required'>[],
  passed: boolean,
): string {
  const total = criteria.length;
  if (total === 0) return 'No criteria';
  const missed = criteria.filter((c) => c.verdict === 'not-met').length;
  const unreached = criteria.filter((c) => c.verdict === 'not-reached').length;
  if (missed === 0 && unreached === 0) return `All ${total} criteria met`;
  const parts = [];
  if (missed > 0) parts.push(`${missed} of ${total} not met`);
  if (unreached > 0) parts.push(`${unreached} not reached`);
  return passed ? `Required criteria met; ${parts.join(', ')}` : parts.join(', ');
}

/** "Met, all 5 criteria", "Not met, 2 of 5 criteria". */
export function verdictWords(criteria: readonly Pick<CriterionResult, 'verdict'>[], passed: boolean): string {
  const total = criteria.length;
  const missed = criteria.filter((c) => c.verdict === 'not-met' || c.verdict === 'not-reached').length;
  if (total === 0) return 'No criteria';
  if (missed === 0) return `Met, all ${total} criteria`;
  return `${passed ? 'Met, but' : 'Not met,'} ${missed} of ${total} criteria${passed ? ' missed' : ''}`;
}

/** Where the recording is. Plain: what is safe, what is still to come. */
export function deliveryWords(status: DeliveryStatus<unknown> | null, durable: boolean): string {
  if (!status) return '';
  const left = status.recorded - status.acknowledged;
  const kept = durable ? 'kept in this browser' : 'kept in this page only; do not close it';
  switch (status.state) {
    case 'delivered':
      return 'Recorded on the server';
    case 'gone':
      return status.refusal ?? 'The server no longer has this attempt';
    case 'signed-out':
      return `Signed out: ${left} s ${kept}, sent when you sign in again`;
    case 'waiting':
      return `No connection: ${left} s ${kept}. Trying again`;
    default:
      return left > 2
        ? `Sending, ${status.acknowledged} of ${status.recorded} s`
        : `${status.acknowledged} s on the server`;
  }
}
