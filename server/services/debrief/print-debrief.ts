import { PROGRAM_VERSION } from '../../config/program-version.ts';
import type { Database } from '../../data/database.ts';
import { debriefSheet, type DebriefSheetData } from '../../reports/debrief-sheet.ts';
import type { CriterionResult } from '#shared/scenario/run-types.ts';
import { may, requireDeed, type Actor } from '../permissions.ts';
import { notFound, ProblemError } from '../problem-error.ts';
import type { WorkerPool } from '../workers/worker-pool.ts';
import { debriefSeriesSchema, type DebriefSeries, type DebriefTrace } from './debrief-series.ts';
import { standingEntry } from './debrief.service.ts';
import type { RerunJob } from '../attempts/result-of-run.ts';
import { flownIn } from '../attempts/flown-in-class.ts';

const WORDS = { met: 'Met', near: 'Close', 'not-met': 'Not met', 'not-reached': 'Not reached' } as const;
const TICKS_PER_S = 120;

const dateWords = (at: Date): string => at.toISOString().slice(0, 10);
const timeWords = (at: Date): string => `${at.toISOString().slice(0, 16).replace('T', ', ')} UTC`;
const number = (value: number, digits = 3): string => String(Number(value.toPrecision(digits)));

/** The printed debrief of an attempt, made from the stored result and a fresh integration of its inputs. */
export function createPrintDebrief(setup: { database: Database; debriefs: WorkerPool; now: () => Date }) {
  const { database, debriefs, now } = setup;
  return async (actor: Actor, id: string): Promise<{ file: Buffer; name: string }> => {
    requireDeed(actor, 'attempt.read-own');
    const detail = await database.attempts.findDetail(actor.organisationId, id);
    const allowed = detail !== null && (detail.personId === actor.personId || may(actor, 'attempt.read-others'));
    if (!allowed) throw notFound('attempt');
    if (detail.result === null)
      throw new ProblemError('conflict', 'A debrief is printed once the attempt is complete.');
    const { result } = detail;
    const [profile, chunks, remarks, signatures] = await Promise.all([
      database.people.findProfile(actor.organisationId, detail.personId),
      database.chunks.all(id),
      database.debrief.remarks(actor.organisationId, id),
      database.debrief.signOffs(actor.organisationId, id),
    ]);
    const job: RerunJob = {
      scenario: detail.scenario.document,
      airframe: detail.scenario.airframe.document,
      seed: detail.seed,
      drawn: detail.drawn,
      chunkKey: detail.chunkKey,
      chunks: chunks.map(({ hash, bytes }) => ({ hash, bytes: new Uint8Array(bytes) })),
      branches: (await flownIn(database, id))?.branches,
    };
    const series = debriefSeriesSchema.parse(await debriefs.run(job));
    const atWords = (tick: number): string => {
      const s = tick / TICKS_PER_S - series.zeroS;
      return `${s < 0 ? '-' : '+'}${Math.abs(s).toFixed(1)} s`;
    };
    const data: DebriefSheetData = {
      organisation: profile?.organisation.name ?? '',
      caution: profile?.organisation.settings.caution ?? '',
      number: `${id.slice(0, 8)}/${detail.number}`,
      title: detail.scenarioTitle,
      subtitle: `${detail.airframeName}, revision ${detail.scenario.airframe.revision}; scenario revision ${detail.scenario.revision}; seed ${detail.seed}`,
      trace: `model ${result.modelVersion} · state ${result.stateHash} · program ${PROGRAM_VERSION}`,
      printed: timeWords(now()),
      trainee: detail.person.displayName,
      flownOn: dateWords(detail.startedAt),
      attempt: String(detail.number),
      passed: result.passed,
      notMet: result.criteria.filter((c) => c.required && c.verdict !== 'met' && c.verdict !== 'near').length,
      criteriaCount: result.criteria.filter((c) => c.required).length,
      agrees: result.statesAgree,
      zeroS: series.zeroS,
      durationS: Math.max(0.1, result.durationS),
      firstPedalS: series.firstPedalS,
      arrestedS: series.arrestedS,
      deadWords: series.deadWords,
      events: series.events,
      strip: series.strip,
      rows: rowsOf(series, result.criteria),
      criteria: result.criteria.map(criterionLine),
      remarks: remarks
        .filter((remark) => remark.withdrawnAt === null)
        .map((remark) => ({ at: atWords(remark.tick), text: remark.text, author: remark.author.displayName })),
      signatures: (['sign-off', 'counter-signature'] as const).flatMap((kind) => {
        const entry = standingEntry(signatures, kind);
        if (entry === null) return [];
        return [
          {
            kind: kind === 'sign-off' ? 'Signed off' : 'Counter-signed',
            verdict: entry.verdict === 'met' ? 'met' : 'not met',
            signer: entry.signer.displayName,
            at: timeWords(entry.createdAt),
            note: entry.note,
          },
        ];
      }),
    };
    const file = await debriefSheet(data);
    return { file, name: `debrief-${detail.scenario.slug}-${detail.number}.pdf` };
  };
}

/** Limit of a symmetric criterion in degrees, where the scenario has one for the trace. */
function limitOf(criteria: readonly CriterionResult[], ...measures: string[]): number | null {
  const found = criteria.find(
    (c) => measures.includes(c.measure) && c.limit.max !== undefined && c.limit.unit === 'deg',
  );
  return found?.limit.max ?? null;
}

function rowsOf({ flown, reference }: DebriefSeries, criteria: readonly CriterionResult[]): DebriefSheetData['rows'] {
  const row = (name: string, unit: string, pick: Exclude<keyof DebriefTrace, 'timeS'>, limit: number | null) => ({
    name,
    unit,
    timeS: flown.timeS,
    values: flown[pick],
    reference: reference === null ? null : { timeS: reference.timeS, values: reference[pick] },
    limit,
  });
  return [
    row('Sideslip', 'deg', 'betaDeg', limitOf(criteria, 'sideslip')),
    row('Bank', 'deg', 'phiDeg', limitOf(criteria, 'bank', 'bank-dead-side')),
    row('Heading', 'deg off', 'headingDeg', limitOf(criteria, 'heading-deviation')),
    row('Pedal', '% right', 'pedalPct', null),
  ];
}

function criterionLine(c: CriterionResult): DebriefSheetData['criteria'][number] {
  const { max, min, within, unit } = c.limit;
  const limit =
    max !== undefined
      ? `max ${number(max)}`
      : min !== undefined
        ? `min ${number(min)}`
        : within
          ? `${number(within[0])}..${number(within[1])}`
          : '';
  const bound = max ?? min ?? null;
  return {
    title: c.title,
    limit: `${limit} ${unit}`.trim(),
    flown: c.value === null ? (c.note ?? '–') : `${number(c.value)} ${unit}`.trim(),
    margin: c.margin === null ? '–' : `${c.margin > 0 ? '+' : ''}${number(c.margin)}`,
    state: c.verdict,
    word: WORDS[c.verdict],
    bar:
      bound === null || c.value === null || bound <= 0
        ? null
        : {
            value: Math.max(0, c.value) / (1.33 * bound),
            limit: 1 / 1.33,
            forbid: max !== undefined ? 'above' : 'below',
          },
  };
}
