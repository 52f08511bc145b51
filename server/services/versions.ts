import { editionOf } from '#shared/contracts/edition.ts';
import { ProblemError } from './problem-error.ts';

/** Version of a stored thing as clients see it: opaque, different for a new thing under an old name. */
export const versionText = (id: string, version: number): string => `${id.slice(0, 8)}.${version}`;

const whenText = new Intl.DateTimeFormat('en-GB', {
  day: 'numeric',
  month: 'long',
  hour: '2-digit',
  minute: '2-digit',
  timeZone: 'UTC',
});

/** Date and time in words, UTC. */
export const inWords = (at: Date): string => `${whenText.format(at)} UTC`;

/**
 * The version named in an If-Match header.
 *
 * @throws {ProblemError} version-needed
 */
export function wantedVersion(header: string | undefined): string {
  const version = /^\s*(?:W\/)?"([^"]{1,80})"\s*$/.exec(header ?? '')?.[1];
  if (version !== undefined) return version;
  throw new ProblemError(
    'version-needed',
    'Saving needs the version that was read, in If-Match; open it again and save.',
  );
}

/** The version in If-Match where there is one; without it the caller does not mind what is overwritten. */
export const possibleVersion = (header: string | undefined): string | null =>
  header === undefined ? null : wantedVersion(header);

/** @throws {ProblemError} changed-meanwhile when a version is wanted and `present` is no longer it */
export function requireEdition(wanted: string | null, present: unknown, what: string): void {
  if (wanted === null || wanted === editionOf(present)) return;
  throw new ProblemError(
    'changed-meanwhile',
    `Someone else changed ${what} meanwhile. Read it again, then make your change.`,
  );
}
