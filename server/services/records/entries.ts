/** What stands among entries that are only ever added: the last of its kind. */

interface SignatureEntry {
  attemptId: string;
  kind: 'sign-off' | 'counter-signature';
  verdict: 'met' | 'not-met';
  signer: string;
  at: Date;
}
export interface StandingSignatures {
  signOff: SignatureEntry | null;
  counter: SignatureEntry | null;
}

/** Entries come oldest first. A counter-signature stands for the sign-off before it; a newer sign-off needs a new one. */
export function standingSignatures(entries: readonly SignatureEntry[]): Map<string, StandingSignatures> {
  const standing = new Map<string, StandingSignatures>();
  for (const entry of entries) {
    const before = standing.get(entry.attemptId) ?? { signOff: null, counter: null };
    standing.set(
      entry.attemptId,
      entry.kind === 'sign-off' ? { signOff: entry, counter: null } : { ...before, counter: entry },
    );
  }
  return standing;
}

/** Attempts that are set aside: the last entry that is more than a note decides. */
export function setAsideNow(
  entries: readonly { attemptId: string; effect: 'note' | 'set-aside' | 'restored' }[],
): Set<string> {
  const aside = new Set<string>();
  for (const { attemptId, effect } of entries) {
    if (effect === 'set-aside') aside.add(attemptId);
    else if (effect === 'restored') aside.delete(attemptId);
  }
  return aside;
}
