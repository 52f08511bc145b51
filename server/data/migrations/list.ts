import { Foundation1764547200000 } from './1764547200000-foundation.ts';
import { Guards1764547200001 } from './1764547200001-guards.ts';
import { Debrief1764547250000 } from './1764547250000-debrief.ts';
import { EngineersBench1764547300000 } from './1764547300000-engineers-bench.ts';
import { Rewinds1764547350000 } from './1764547350000-rewinds.ts';
import { ScenarioDrafts1764547400000 } from './1764547400000-scenario-drafts.ts';
import { Classes1764547500000 } from './1764547500000-classes.ts';
import { Assignments1764547700000 } from './1764547700000-assignments.ts';
import { NoticeMail1764547710000 } from './1764547710000-notice-mail.ts';
import { PeopleMailAudit1764547800000 } from './1764547800000-people-mail-audit.ts';
import { Profiles1764547820000 } from './1764547820000-profiles.ts';
import { Tokens1764548300000 } from './1764548300000-tokens.ts';

/** Migrations in the order in which they run. */
export const MIGRATIONS = [
  Foundation1764547200000,
  Guards1764547200001,
  Debrief1764547250000,
  EngineersBench1764547300000,
  Rewinds1764547350000,
  ScenarioDrafts1764547400000,
  Classes1764547500000,
  Assignments1764547700000,
  NoticeMail1764547710000,
  PeopleMailAudit1764547800000,
  Profiles1764547820000,
  Tokens1764548300000,
];
