import type { DataSource, EntityManager } from 'typeorm';
import { untilNoDeadlock } from './deadlock.ts';
import { type DataSourceSetup, createDataSource } from './data-source.ts';
import { migrate } from './migrate.ts';
import {
  type AirframeEditingRepository,
  createAirframeEditingRepository,
} from './repositories/airframe-editing.repository.ts';
import { type AirframesRepository, createAirframesRepository } from './repositories/airframes.repository.ts';
import { type AssignmentsRepository, createAssignmentsRepository } from './repositories/assignments.repository.ts';
import { type AttemptsRepository, createAttemptsRepository } from './repositories/attempts.repository.ts';
import { type AuditRepository, createAuditRepository } from './repositories/audit.repository.ts';
import { type CohortsRepository, createCohortsRepository } from './repositories/cohorts.repository.ts';
import { type ChunksRepository, createChunksRepository } from './repositories/chunks.repository.ts';
import { type DebriefRepository, createDebriefRepository } from './repositories/debrief.repository.ts';
import { type ClassesRepository, createClassesRepository } from './repositories/classes.repository.ts';
import {
  type OrganisationsRepository,
  createOrganisationsRepository,
} from './repositories/organisations.repository.ts';
import { type PeopleRepository, createPeopleRepository } from './repositories/people.repository.ts';
import { type PlaylistsRepository, createPlaylistsRepository } from './repositories/playlists.repository.ts';
import { type AccountLinksRepository, createAccountLinksRepository } from './repositories/account-links.repository.ts';
import { type AccessTokensRepository, createAccessTokensRepository } from './repositories/access-tokens.repository.ts';
import { type IdempotencyRepository, createIdempotencyRepository } from './repositories/idempotency.repository.ts';
import { type OutboxRepository, createOutboxRepository } from './repositories/outbox.repository.ts';
import { type BudgetsRepository, createBudgetsRepository } from './repositories/budgets.repository.ts';
import { type RecordsRepository, createRecordsRepository } from './repositories/records.repository.ts';
import { type StatementsRepository, createStatementsRepository } from './repositories/statements.repository.ts';
import { type RetentionRepository, createRetentionRepository } from './repositories/retention.repository.ts';
import { type NoticeMailRepository, createNoticeMailRepository } from './repositories/notice-mail.repository.ts';
import { type PersonalRepository, createPersonalRepository } from './repositories/personal.repository.ts';
import { type ReportCountsRepository, createReportCountsRepository } from './repositories/report-counts.repository.ts';
import {
  type ScenarioEditingRepository,
  createScenarioEditingRepository,
} from './repositories/scenario-editing.repository.ts';
import { type ScenariosRepository, createScenariosRepository } from './repositories/scenarios.repository.ts';
import { type SessionsRepository, createSessionsRepository } from './repositories/sessions.repository.ts';
import { type SkinsRepository, createSkinsRepository } from './repositories/skins.repository.ts';
import { type SystemRepository, createSystemRepository } from './repositories/system.repository.ts';
import { type StudiesRepository, createStudiesRepository } from './repositories/studies.repository.ts';
import { type ThrottlesRepository, createThrottlesRepository } from './repositories/throttles.repository.ts';

/** All that services may ask of the database; inside {@link Database.transaction} the same on one connection. */
export interface Repositories {
  readonly organisations: OrganisationsRepository;
  readonly people: PeopleRepository;
  readonly cohorts: CohortsRepository;
  readonly sessions: SessionsRepository;
  readonly airframes: AirframesRepository;
  readonly airframeEditing: AirframeEditingRepository;
  readonly skins: SkinsRepository;
  readonly studies: StudiesRepository;
  readonly reportCounts: ReportCountsRepository;
  readonly scenarios: ScenariosRepository;
  readonly scenarioEditing: ScenarioEditingRepository;
  readonly attempts: AttemptsRepository;
  readonly chunks: ChunksRepository;
  readonly debrief: DebriefRepository;
  readonly classes: ClassesRepository;
  readonly throttles: ThrottlesRepository;
  readonly assignments: AssignmentsRepository;
  readonly budgets: BudgetsRepository;
  readonly records: RecordsRepository;
  readonly statements: StatementsRepository;
  readonly retention: RetentionRepository;
  readonly personal: PersonalRepository;
  readonly noticeMail: NoticeMailRepository;
  readonly playlists: PlaylistsRepository;
  readonly accountLinks: AccountLinksRepository;
  readonly accessTokens: AccessTokensRepository;
  readonly idempotency: IdempotencyRepository;
  readonly outbox: OutboxRepository;
  readonly audit: AuditRepository;
  readonly system: SystemRepository;
}

export interface Database extends Repositories {
  /** Runs `work` on one connection, all of it or nothing; again from the start when the database chose it to end a deadlock. */
  transaction<T>(work: (repositories: Repositories) => Promise<T>): Promise<T>;
  /** Resolves when the database answers. */
  ping(): Promise<void>;
  close(): Promise<void>;
}

function repositories(manager: EntityManager): Repositories {
  return {
    organisations: createOrganisationsRepository(manager),
    people: createPeopleRepository(manager),
    cohorts: createCohortsRepository(manager),
    sessions: createSessionsRepository(manager),
    airframes: createAirframesRepository(manager),
    airframeEditing: createAirframeEditingRepository(manager),
    skins: createSkinsRepository(manager),
    studies: createStudiesRepository(manager),
    reportCounts: createReportCountsRepository(manager),
    scenarios: createScenariosRepository(manager),
    scenarioEditing: createScenarioEditingRepository(manager),
    attempts: createAttemptsRepository(manager),
    chunks: createChunksRepository(manager),
    debrief: createDebriefRepository(manager),
    classes: createClassesRepository(manager),
    throttles: createThrottlesRepository(manager),
    assignments: createAssignmentsRepository(manager),
    budgets: createBudgetsRepository(manager),
    records: createRecordsRepository(manager),
    statements: createStatementsRepository(manager),
    retention: createRetentionRepository(manager),
    personal: createPersonalRepository(manager),
    noticeMail: createNoticeMailRepository(manager),
    playlists: createPlaylistsRepository(manager),
    accountLinks: createAccountLinksRepository(manager),
    accessTokens: createAccessTokensRepository(manager),
    idempotency: createIdempotencyRepository(manager),
    outbox: createOutboxRepository(manager),
    audit: createAuditRepository(manager),
    system: createSystemRepository(manager),
  };
}

/** The database behind a connected data source. */
export function databaseOf(source: DataSource): Database {
  return {
    ...repositories(source.manager),
    transaction: (work) => untilNoDeadlock(() => source.transaction((manager) => work(repositories(manager)))),
    ping: async () => {
      await source.query('SELECT 1');
    },
    close: () => source.destroy(),
  };
}

/**
 * Connects and brings the schema up to date.
 *
 * @returns The database and the names of the migrations that ran.
 */
export async function openDatabase(setup: DataSourceSetup): Promise<{ database: Database; migrations: string[] }> {
  const source = createDataSource(setup);
  await source.initialize();
  try {
    return { migrations: await migrate(source), database: databaseOf(source) };
  } catch (error) {
    await source.destroy();
    throw error;
  }
}
