import type { Writable } from 'node:stream';
import { PROGRAM_VERSION } from '../../config/program-version.ts';
import type { Database } from '../../data/database.ts';
import { transcriptSheet } from '../../reports/transcript-sheet.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound } from '../problem-error.ts';
import { setAsideNow, standingSignatures } from './entries.ts';
import { metOf, readerOf } from './matrix.ts';

const WORDS = { met: 'Met', near: 'Close', 'not-met': 'Not met', 'not-reached': 'Not reached' } as const;
const dayWords = (at: Date): string => at.toISOString().slice(0, 10);
const timeWords = (at: Date): string => at.toISOString().slice(0, 16).replace('T', ' ');
const signedNumber = (value: number): string => `${value > 0 ? '+' : ''}${Number(value.toPrecision(3))}`;

/** What concerns one person: the printed transcript, and all that is kept about them. */
export function createPersonal({ database, now }: { database: Database; now: () => Date }) {
  const gather = async (organisationId: string, personId: string) => {
    const [attempts, signatures, corrections] = await Promise.all([
      database.records.full(organisationId, [personId], null, {}),
      database.records.signatures([personId]),
      database.records.corrections([personId]),
    ]);
    return { attempts, signatures, corrections };
  };

  return {
    async transcript(actor: Actor, personId: string): Promise<{ file: Buffer; name: string }> {
      const reader = readerOf(actor);
      if (reader !== null && reader !== personId) throw notFound('record');
      const { organisationId } = actor;
      const profile = await database.people.findProfile(organisationId, personId);
      if (profile === null) throw notFound('record');
      const { attempts, signatures, corrections } = await gather(organisationId, personId);
      const standing = standingSignatures(signatures);
      const aside = setAsideNow(corrections);
      const counted = attempts.filter((attempt) => attempt.passed !== null && !aside.has(attempt.id));
      const stateOf = (attempt: (typeof attempts)[number]) => {
        const met = metOf(attempt, standing.get(attempt.id));
        const verdict = attempt.verdict ?? 'not-reached';
        // A signature that decides otherwise than the computed result is shown as what it decides.
        const state = met === true ? (verdict === 'near' ? 'near' : 'met') : met === false ? 'not-met' : verdict;
        return { state, word: aside.has(attempt.id) ? 'Set aside' : WORDS[state] } as const;
      };
      const marginOf = ({ worst }: (typeof attempts)[number]): string =>
        worst === null ? '–' : `${signedNumber(worst.margin)} ${worst.unit}`.trim();
      const scenarios = [...new Set(counted.map(({ scenarioId }) => scenarioId))].map((scenarioId) => {
        const own = counted.filter((attempt) => attempt.scenarioId === scenarioId);
        const last = own[own.length - 1];
        const signed = own.map(({ id }) => standing.get(id)?.signOff).findLast((entry) => entry != null);
        return { last, own, signed, met: own.some((attempt) => metOf(attempt, standing.get(attempt.id)) === true) };
      });
      const at = now();
      const number = new Map(attempts.map(({ id, title, number: n }) => [id, `${title}, attempt ${n}`]));
      const entries = [
        ...signatures.map((entry) => ({
          at: entry.at,
          text: `${entry.kind === 'sign-off' ? 'Signed off' : 'Counter-signed'} as ${WORDS[entry.verdict].toLowerCase()} by ${entry.signer}: ${number.get(entry.attemptId) ?? ''}${entry.note ? `. ${entry.note}` : ''}`,
        })),
        ...corrections.map((entry) => ({
          at: entry.at,
          text: `Correction by ${entry.author}, ${entry.effect === 'note' ? 'note' : entry.effect === 'restored' ? 'counts again' : 'set aside'}: ${number.get(entry.attemptId) ?? ''}. ${entry.reason}`,
        })),
      ].sort((a, b) => a.at.getTime() - b.at.getTime());
      const file = await transcriptSheet({
        organisation: profile.organisation.name,
        number: personId.slice(0, 8),
        trainee: profile.person.fullName || profile.person.displayName,
        subtitle: `Record as of ${timeWords(at)} UTC`,
        trace: `program ${PROGRAM_VERSION}`,
        printed: `${timeWords(at)} UTC`,
        caution: profile.organisation.settings.caution,
        totals: {
          scenarios: scenarios.length,
          met: scenarios.filter(({ met }) => met).length,
          signed: scenarios.filter(({ signed }) => signed?.verdict === 'met').length,
          attempts: attempts.length,
        },
        scenarios: scenarios.map(({ last, own, signed }) => ({
          title: last.title,
          revision: last.revision,
          attempts: own.length,
          last: dayWords(last.startedAt),
          ...stateOf(last),
          margin: marginOf(last),
          signed: signed ? signed.signer : '–',
        })),
        attempts: attempts.map((attempt) => ({
          at: timeWords(attempt.startedAt),
          title: attempt.title,
          number: String(attempt.number),
          duration: attempt.durationS === null ? '–' : `${attempt.durationS.toFixed(0)} s`,
          reaction: attempt.firstPedalS === null ? '–' : `${attempt.firstPedalS.toFixed(2)} s`,
          margin: marginOf(attempt),
          ...stateOf(attempt),
        })),
        entries: entries.map((entry) => `${timeWords(entry.at)} UTC  ${entry.text}`),
      });
      const slug = profile.person.displayName
        .normalize('NFKD')
        .toLowerCase()
        .replace(/[^a-z0-9]+/g, '-')
        .replace(/^-+|-+$/g, '');
      return { file, name: `transcript-${slug || personId.slice(0, 8)}.pdf` };
    },

    /** All that is kept about the reader, as one JSON document written in pieces, recordings included. */
    async ownData(actor: Actor, out: Writable): Promise<void> {
      requireDeed(actor, 'record.read-own');
      const { organisationId, personId } = actor;
      const profile = await database.people.findProfile(organisationId, personId);
      if (profile === null) throw notFound('person');
      const { attempts, signatures, corrections } = await gather(organisationId, personId);
      const page = { page: 1, pageSize: 100_000 };
      const [remarks, records, deeds] = await Promise.all([
        database.debrief.received(organisationId, personId, page),
        database.assignments.ofPerson(organisationId, personId),
        database.personal.deeds(organisationId, personId),
      ]);
      const sessions = await database.personal.sessions(personId);
      const head = {
        format: 'sidewash.own-data/1',
        written: now().toISOString(),
        person: profile.person,
        roles: profile.roles,
        organisation: profile.organisation.name,
        cohorts: await database.personal.cohorts(personId),
        sessions,
        assignments: records.map(({ id, title, words, opensAt, dueAt, author }) => ({
          ...{ id, title, words, author },
          opensAt: opensAt.toISOString(),
          dueAt: dueAt.toISOString(),
        })),
        remarks: remarks.items,
        signatures,
        corrections,
        deeds,
      };
      out.write(`${JSON.stringify(head, null, 1).slice(0, -2)},\n "attempts": [`);
      for (const [i, attempt] of attempts.entries()) {
        const chunks = await database.chunks.all(attempt.id);
        const recording = chunks.map(({ index, startTick, tickCount, hash, bytes }) => ({
          ...{ index, startTick, tickCount, hash },
          bytesBase64: bytes.toString('base64'),
        }));
        out.write(`${i === 0 ? '' : ','}\n${JSON.stringify({ ...attempt, recording })}`);
        // Gives the connection time to take what was written.
        await new Promise((resolve) => setImmediate(resolve));
      }
      out.end('\n ]\n}\n');
    },
  };
}
