import type { ScenarioSummary } from '#shared/contracts/scenarios.ts';

export interface FlownState {
  state: 'met' | 'near' | 'not-met' | 'not-reached' | 'waiting';
  word: string;
  met: boolean;
}

const WORDS = { met: 'Met', near: 'Met, close', 'not-met': 'Not met yet', 'not-reached': 'Not reached' } as const;

/** How a scenario stands with its reader: by the verdict of the last complete attempt. */
export function flownState(attempts: ScenarioSummary['attempts']): FlownState {
  if (attempts === null) return { state: 'waiting', word: 'Not flown', met: false };
  const verdict = attempts.lastVerdict;
  if (verdict === null) return { state: 'waiting', word: 'No result', met: false };
  return { state: verdict, word: WORDS[verdict], met: verdict === 'met' || verdict === 'near' };
}
