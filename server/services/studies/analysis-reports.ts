import { createHash } from 'node:crypto';
import type { AnalysisReportRequest } from '#shared/contracts/studies.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { PROGRAM_VERSION } from '../../config/program-version.ts';
import type { Database } from '../../data/database.ts';
import type { RevisionWithDocument } from '../../data/repositories/airframe-editing.repository.ts';
import { exportedJson } from '../airframes/airframe-files.ts';
import { requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { Caller } from '../sessions/sessions.service.ts';
import type { WorkerPool } from '../workers/worker-pool.ts';
import { type Pinned, pinnedRevisions } from './pinned-revisions.ts';
import { reportAnswerSchema, type ReportJob } from './report-job.ts';

export interface PrintedReport {
  number: string;
  fileName: string;
  bytes: Buffer;
}

const LONGEST_MS = 30_000;
const dateText = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' });
const timeText = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit', timeZone: 'UTC' });

function provenance({ status, note, ...revision }: RevisionWithDocument): string {
  const why = note === '' ? '' : ` “${note}”`;
  if (revision.releasedAt === null)
    return `Draft, last saved ${dateText.format(revision.changedAt)} by ${revision.changedBy ?? 'the program'}; not released and may still change.${why}`;
  const retired = status === 'retired' && revision.retiredAt ? ` Retired ${dateText.format(revision.retiredAt)}.` : '';
  return `Released ${dateText.format(revision.releasedAt)} by ${revision.releasedBy ?? 'the program'}:${why || ' no note.'}${retired}`;
}

/** @throws {ProblemError} validation when the revision's data has errors */
function requireParsed({ slug, revision }: Pinned): void {
  const parsed = parseAirframe(revision.document);
  if (parsed.ok) return;
  throw new ProblemError(
    'validation',
    `“${slug}” revision ${revision.revision} has errors in its data; nothing can be computed before they are mended.`,
    { errors: parsed.issues },
  );
}

/** Printed reports of studies, numbered within the organisation. */
export function createAnalysisReports(setup: { database: Database; threads: WorkerPool; now: () => Date }) {
  const { database, threads, now } = setup;
  return async (actor: Actor, request: AnalysisReportRequest, caller: Caller): Promise<PrintedReport> => {
    requireDeed(actor, 'study.read');
    const study = 'study' in request ? await database.studies.find(actor.organisationId, request.study) : null;
    if ('study' in request && study === null) throw notFound('study');
    const wanted = 'state' in request ? request.state : (study?.state ?? {});
    const { pinned, state } = await pinnedRevisions(database, actor, wanted);
    pinned.forEach(requireParsed);
    const [{ slug, revision }] = pinned;
    const at = now();
    const digest = createHash('sha256').update(exportedJson(revision.document)).digest('hex');
    const profile = await database.people.findProfile(actor.organisationId, actor.personId);
    const next = await database.transaction((on) => on.reportCounts.next(actor.organisationId, 'analysis'));
    const number = `AR-${String(next).padStart(4, '0')}`;
    const job: ReportJob = {
      head: {
        number,
        organisation: profile?.organisation.name ?? '',
        caution: profile?.organisation.settings.caution ?? '',
        printed: `${dateText.format(at)}, ${timeText.format(at)} UTC`,
        programVersion: PROGRAM_VERSION,
        study: study?.name ?? '',
        slug,
        name: revision.name,
        revision: revision.revision,
        status: revision.status,
        provenance: provenance(revision),
        digest,
      },
      state,
      units: request.units,
      subjects: pinned.map((p) => ({
        label: p.slug === slug ? `Revision ${p.revision.revision}` : `${p.revision.name}, ${p.revision.revision}`,
        document: p.revision.document,
      })),
      answers: revision.answers,
    };
    const answer = reportAnswerSchema.parse(await threads.run(job, { withinMs: LONGEST_MS }));
    if ('refused' in answer) throw new ProblemError('validation', answer.refused);
    await database.audit.append({
      organisationId: actor.organisationId,
      at,
      actorId: actor.personId,
      deed: 'report.printed',
      subjectKind: 'report',
      subjectId: number,
      detail: {
        airframe: slug,
        revision: revision.revision,
        digest,
        study: study?.id ?? null,
        state,
        sha256: createHash('sha256').update(answer.pdf).digest('hex'),
      },
      address: caller.address,
    });
    return { number, fileName: `${number}-${slug}-revision-${revision.revision}.pdf`, bytes: Buffer.from(answer.pdf) };
  };
}
