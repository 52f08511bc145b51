/** The server's API in the words of the delivery. */
import type { AttemptResult } from '#shared/contracts/attempts.ts';
import type { DeliveryFault, DeliveryPorts } from '../runner/record/delivery-types.ts';
import { isApiError } from '../services/api-error.ts';
import { completeAttempt, getAttempt, putChunk } from '../services/attempts-api.ts';

/** Kinds of refusal that mean: this chunk cannot become part of the recording. */
export function faultOf(error: unknown): DeliveryFault {
  if (!isApiError(error)) return { kind: 'unreachable', retryAfterS: null };
  switch (error.code) {
    case 'chunk-refused': {
      const refusal = error.chunk;
      if (refusal?.reason === 'ahead-of-clock') return { kind: 'unreachable', retryAfterS: 2 };
      if (refusal?.reason === 'predecessor-missing' && refusal.expected !== null) {
        return { kind: 'wanted', index: refusal.expected };
      }
      return { kind: 'refused', detail: error.detail };
    }
    case 'chunks-missing':
      return error.missing.length > 0
        ? { kind: 'missing', indices: error.missing }
        : { kind: 'refused', detail: error.detail };
    case 'attempt-closed':
      return { kind: 'closed' };
    case 'unauthenticated':
    case 'session-expired':
    case 'deactivated':
      return { kind: 'signed-out' };
    case 'not-found':
    case 'forbidden':
      return { kind: 'gone', detail: error.detail };
    case 'validation':
    case 'too-large':
      return { kind: 'refused', detail: error.detail };
    default:
      return { kind: 'unreachable', retryAfterS: error.retryAfterS };
  }
}

export function createDeliveryPorts(): DeliveryPorts<AttemptResult> {
  return {
    async putChunk(attemptId, index, bytes, hash) {
      await putChunk(attemptId, index, bytes, hash);
    },
    complete: completeAttempt,
    result: async (attemptId) => (await getAttempt(attemptId)).result,
    faultOf,
    later(ms, callback) {
      const timer = setTimeout(callback, ms);
      return () => clearTimeout(timer);
    },
  };
}
