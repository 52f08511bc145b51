import path from 'node:path';
import { projectFolder } from '../config/project-folder.ts';
import type { Database } from '../data/database.ts';
import { createAirframeDetail } from './airframes/airframe-detail.ts';
import { createAirframeDrafts } from './airframes/airframe-drafts.ts';
import { createAirframeFiles } from './airframes/airframe-files.ts';
import { createAirframeRelease } from './airframes/airframe-release.ts';
import { createAirframeSkins } from './airframes/airframe-skins.ts';
import { createCloseAttempt, createCompleteAttempt } from './attempts/complete-attempt.ts';
import { createReadAttempts } from './attempts/read-attempts.ts';
import { createStartAttempt } from './attempts/start-attempt.ts';
import { createStoreChunk } from './attempts/store-chunk.ts';
import { createClassServices } from './classes/create-class-services.ts';
import { createPrintDebrief } from './debrief/print-debrief.ts';
import { createAuditChain } from './audit/audit-chain.ts';
import { createAuditService } from './audit/audit.service.ts';
import { createOutboxService, type MailRoute } from './mail/outbox.service.ts';
import { createSendMail } from './mail/send-mail.ts';
import { createAccountLinks } from './people/account-links.ts';
import { createProfileService } from './people/profile.service.ts';
import { createPeopleService } from './people/people.service.ts';
import { createCohortsService } from './cohorts/cohorts.service.ts';
import { createDebriefService } from './debrief/debrief.service.ts';
import { createAssignmentsService } from './assignments/assignments.service.ts';
import { createKeepMail } from './assignments/keep-mail.ts';
import { createNotices, type QueueMail } from './assignments/notices.ts';
import { createTellAuthor } from './assignments/tell-author.ts';
import { createReadAssignments } from './assignments/read-assignments.ts';
import { createAirframesService } from './library/airframes.service.ts';
import { createScenariosService } from './library/scenarios.service.ts';
import { createScenarioDrafts } from './scenarios/scenario-drafts.ts';
import { createScenarioPublishing } from './scenarios/scenario-publishing.ts';
import { createPlaylistsService } from './playlists/playlists.service.ts';
import { createCells } from './records/cell.ts';
import { createDeliverStatements } from './records/deliver-statements.ts';
import { createDistributions } from './records/distribution.ts';
import { createExports } from './records/exports.ts';
import { createMatrix } from './records/matrix.ts';
import { createPersonal } from './records/personal.ts';
import { createRetention } from './records/retention.ts';
import { createSecrets } from './records/secrets.ts';
import { createStatements } from './records/statements.ts';
import { createAccessTokens } from './sessions/access-tokens.ts';
import { createPasswords } from './sessions/passwords.ts';
import { createSessionNotices } from './sessions/session-notices.ts';
import { createSessionsService } from './sessions/sessions.service.ts';
import { createSetUp } from './set-up/set-up.service.ts';
import { createAnalysisReports } from './studies/analysis-reports.ts';
import { createStudiesService } from './studies/studies.service.ts';
import { createSystemService, type Surroundings } from './system/system.service.ts';
import { createAccessTokensService } from './tokens/access-tokens.service.ts';
import { createOnceService } from './tokens/once.service.ts';
import { createWorkerPool } from './workers/worker-pool.ts';

export interface ServicesSetup {
  database: Database;
  tokenSecret: string;
  now?: () => Date;
  /** Address under which people reach the product, for links in mail. */
  address?: () => string;
  /** Where the mail queue sends to, for the outbox page. */
  mailRoute?: () => MailRoute;
  /** What only the process knows, for the system page. */
  surroundings?: () => Surroundings;
  /** Where messages of assignments go; they wait in a table of their own when absent. */
  queueMail?: QueueMail;
}

/** All use cases over one database, with the threads they need. `close` ends the threads. */
export function createServices(setup: ServicesSetup) {
  const { database, tokenSecret, now = () => new Date(), address = () => 'http://localhost' } = setup;
  const surroundings = setup.surroundings ?? (() => ({ dataFolder: null, pingRedis: null }));
  const { queueMail = createKeepMail(now), mailRoute = () => ({ server: null, sinkFolder: null }) } = setup;
  const sessionNotices = createSessionNotices();
  const auditChain = createAuditChain({ database, now });
  const passwordThreads = createWorkerPool('password', 1);
  const reruns = createWorkerPool('rerun', 2);
  const reports = createWorkerPool('analysis-report', 1);
  const debriefs = createWorkerPool('debrief', 1);
  const sheets = createWorkerPool('sheet', 1);
  const passwords = createPasswords(passwordThreads);
  const budgets = createWorkerPool('budget', 1);
  const secrets = createSecrets(tokenSecret);
  const statements = createStatements({ database, secrets, address, now });
  const notices = createNotices({ queueMail, address });
  const tellAuthor = createTellAuthor(notices);
  const reads = createReadAssignments({ database, address, now });
  const closeAttempt = createCloseAttempt({
    database,
    reruns,
    now,
    onCompleted: async (on, detail, result, at) => {
      await tellAuthor(on, detail, result, at);
      await statements.onCompleted(on, detail.organisationId, detail.id, at);
    },
  });
  const classes = createClassServices({ database, tokenSecret, close: closeAttempt, now });
  const system = createSystemService({ database, mailRoute, surroundings, now });
  return {
    database,
    passwords,
    system: { state: system.state },
    sessions: createSessionsService({
      database,
      passwords,
      accessTokens: createAccessTokens(tokenSecret, now),
      notices: sessionNotices,
      now,
    }),
    tokens: createAccessTokensService({ database, now }),
    once: createOnceService({ database, now }),
    accountLinks: createAccountLinks({ database, passwords, notices: sessionNotices, address, now }),
    profile: createProfileService({ database, passwords, notices: sessionNotices, address, now }),
    setUp: createSetUp({ database, passwords, libraryFolder: path.join(projectFolder, 'scenarios'), now }),
    people: createPeopleService({ database, notices: sessionNotices, address, now }),
    cohorts: createCohortsService({ database, now }),
    outbox: createOutboxService({ database, mailRoute, now }),
    sendMail: createSendMail({ database, now }),
    audit: createAuditService({ database, chain: auditChain }),
    auditChain,
    airframes: createAirframesService({ database }),
    airframeEditing: {
      detail: createAirframeDetail({ database }),
      drafts: createAirframeDrafts({ database, now }),
      release: createAirframeRelease({ database, now }),
      files: createAirframeFiles({ database, sheets }),
      skins: createAirframeSkins({ database, now }),
    },
    assignments: { ...reads, ...createAssignmentsService({ database, notices, reads, now }) },
    records: {
      ...createMatrix({ database }),
      ...createCells({ database, now, onCorrected: statements.onCorrected }),
      ...createDistributions({ database, budgets, now }),
      ...createExports({ database, statements, now }),
      ...createPersonal({ database, now }),
      ...createRetention({ database, now }),
      endpoint: statements.endpoint,
      saveEndpoint: statements.saveEndpoint,
      pushAll: statements.pushAll,
      deliver: createDeliverStatements({ database, secrets, now }),
    },
    playlists: createPlaylistsService({ database, now }),
    studies: createStudiesService({ database, now }),
    printAnalysis: createAnalysisReports({ database, threads: reports, now }),
    scenarios: createScenariosService({ database }),
    scenarioEditing: {
      drafts: createScenarioDrafts({ database, now }),
      publishing: createScenarioPublishing({ database, now }),
    },
    attempts: {
      start: createStartAttempt({ database, now }),
      storeChunk: createStoreChunk({ database, now }),
      complete: createCompleteAttempt({ database, close: closeAttempt }),
      ...createReadAttempts({ database, now }),
    },
    classes,
    debrief: {
      ...createDebriefService({ database, now, onSigned: statements.onSigned }),
      print: createPrintDebrief({ database, debriefs, now }),
    },
    close: async (): Promise<void> => {
      system.close();
      await classes.chunks.settle();
      await Promise.all([
        passwordThreads.close(),
        reruns.close(),
        debriefs.close(),
        sheets.close(),
        reports.close(),
        budgets.close(),
      ]);
    },
  };
}
export type Services = ReturnType<typeof createServices>;
