import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';

/** Tables of playlists, assignments and records, parents before children. Their repositories speak plain SQL. */
const TABLES: readonly { name: string; columns: string }[] = [
  {
    name: 'playlist',
    columns: `
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      name varchar(120) NOT NULL,
      note text NOT NULL,
      version int UNSIGNED NOT NULL,
      created_by uuid NOT NULL,
      created_at datetime(3) NOT NULL,
      changed_by uuid NOT NULL,
      changed_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      UNIQUE INDEX ux_playlist_organisation_name (organisation_id, name),
      CONSTRAINT fk_playlist_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id),
      CONSTRAINT fk_playlist_author FOREIGN KEY (created_by) REFERENCES person (id),
      CONSTRAINT fk_playlist_changer FOREIGN KEY (changed_by) REFERENCES person (id)`,
  },
  {
    name: 'playlist_item',
    columns: `
      playlist_id uuid NOT NULL,
      position int UNSIGNED NOT NULL,
      scenario_id uuid NOT NULL,
      PRIMARY KEY (playlist_id, position),
      UNIQUE INDEX ux_playlist_item_scenario (playlist_id, scenario_id),
      CONSTRAINT fk_playlist_item_playlist FOREIGN KEY (playlist_id) REFERENCES playlist (id) ON DELETE CASCADE,
      CONSTRAINT fk_playlist_item_scenario FOREIGN KEY (scenario_id) REFERENCES scenario (id)`,
  },
  {
    name: 'assignment',
    columns: `
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      title varchar(200) NOT NULL,
      words text NOT NULL,
      opens_at datetime(3) NOT NULL,
      due_at datetime(3) NOT NULL,
      zone varchar(64) NOT NULL,
      tries int UNSIGNED NULL,
      pass_rule enum ('one', 'two-in-a-row', 'sign-off') NOT NULL,
      practice tinyint NOT NULL,
      by_mail tinyint NOT NULL,
      calendar tinyint NOT NULL,
      reminder_days int UNSIGNED NULL,
      tell_author tinyint NOT NULL,
      version int UNSIGNED NOT NULL,
      created_by uuid NOT NULL,
      created_at datetime(3) NOT NULL,
      changed_at datetime(3) NOT NULL,
      closed_at datetime(3) NULL,
      closed_for varchar(500) NULL,
      PRIMARY KEY (id),
      INDEX ix_assignment_due (organisation_id, closed_at, due_at),
      CONSTRAINT fk_assignment_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id),
      CONSTRAINT fk_assignment_author FOREIGN KEY (created_by) REFERENCES person (id)`,
  },
  {
    name: 'assignment_scenario',
    columns: `
      assignment_id uuid NOT NULL,
      position int UNSIGNED NOT NULL,
      scenario_id uuid NOT NULL,
      scenario_revision_id uuid NOT NULL,
      PRIMARY KEY (assignment_id, position),
      UNIQUE INDEX ux_assignment_scenario (assignment_id, scenario_id),
      INDEX ix_assignment_scenario_scenario (scenario_id),
      CONSTRAINT fk_assignment_scenario_assignment FOREIGN KEY (assignment_id) REFERENCES assignment (id),
      CONSTRAINT fk_assignment_scenario_scenario FOREIGN KEY (scenario_id) REFERENCES scenario (id),
      CONSTRAINT fk_assignment_scenario_revision FOREIGN KEY (scenario_revision_id) REFERENCES scenario_revision (id)`,
  },
  {
    name: 'assignment_person',
    columns: `
      assignment_id uuid NOT NULL,
      person_id uuid NOT NULL,
      cohort_name varchar(80) NULL,
      due_at datetime(3) NOT NULL,
      extra_tries int UNSIGNED NOT NULL,
      sequence int UNSIGNED NOT NULL,
      added_at datetime(3) NOT NULL,
      excused_at datetime(3) NULL,
      PRIMARY KEY (assignment_id, person_id),
      INDEX ix_assignment_person_due (person_id, excused_at, due_at),
      CONSTRAINT fk_assignment_person_assignment FOREIGN KEY (assignment_id) REFERENCES assignment (id),
      CONSTRAINT fk_assignment_person_person FOREIGN KEY (person_id) REFERENCES person (id)`,
  },
  {
    name: 'assignment_extension',
    columns: `
      id uuid NOT NULL,
      assignment_id uuid NOT NULL,
      person_id uuid NOT NULL,
      due_at datetime(3) NOT NULL,
      extra_tries int UNSIGNED NOT NULL,
      reason varchar(500) NOT NULL,
      given_by uuid NOT NULL,
      given_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      INDEX ix_assignment_extension_person (assignment_id, person_id, given_at),
      CONSTRAINT fk_assignment_extension_person FOREIGN KEY (assignment_id, person_id) REFERENCES assignment_person (assignment_id, person_id),
      CONSTRAINT fk_assignment_extension_giver FOREIGN KEY (given_by) REFERENCES person (id)`,
  },
  {
    // Which attempts count for which assignment, numbered without gaps per person and scenario.
    name: 'assignment_attempt',
    columns: `
      attempt_id uuid NOT NULL,
      assignment_id uuid NOT NULL,
      person_id uuid NOT NULL,
      scenario_id uuid NOT NULL,
      try_number int UNSIGNED NOT NULL,
      PRIMARY KEY (attempt_id),
      UNIQUE INDEX ux_assignment_attempt_try (assignment_id, person_id, scenario_id, try_number),
      CONSTRAINT fk_assignment_attempt_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id),
      CONSTRAINT fk_assignment_attempt_person FOREIGN KEY (assignment_id, person_id) REFERENCES assignment_person (assignment_id, person_id)`,
  },
  {
    // One row a notice: the unique key is why none is given twice.
    name: 'assignment_notice',
    columns: `
      id uuid NOT NULL,
      assignment_id uuid NOT NULL,
      person_id uuid NOT NULL,
      kind enum ('set', 'changed', 'cancelled', 'reminder', 'flown') NOT NULL,
      occasion varchar(80) NOT NULL,
      created_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      UNIQUE INDEX ux_assignment_notice_occasion (assignment_id, person_id, kind, occasion),
      CONSTRAINT fk_assignment_notice_assignment FOREIGN KEY (assignment_id) REFERENCES assignment (id),
      CONSTRAINT fk_assignment_notice_person FOREIGN KEY (person_id) REFERENCES person (id)`,
  },
  {
    name: 'record_correction',
    columns: `
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      attempt_id uuid NOT NULL,
      author_id uuid NOT NULL,
      effect enum ('note', 'set-aside', 'restored') NOT NULL,
      reason text NOT NULL,
      created_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      INDEX ix_record_correction_attempt (attempt_id, created_at),
      CONSTRAINT fk_record_correction_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id),
      CONSTRAINT fk_record_correction_author FOREIGN KEY (author_id) REFERENCES person (id)`,
  },
  {
    name: 'budget_result',
    columns: `
      scenario_revision_id uuid NOT NULL,
      model_version varchar(20) NOT NULL,
      budget json NOT NULL,
      computed_at datetime(3) NOT NULL,
      PRIMARY KEY (scenario_revision_id, model_version),
      CONSTRAINT fk_budget_result_revision FOREIGN KEY (scenario_revision_id) REFERENCES scenario_revision (id)`,
  },
  {
    name: 'statement_endpoint',
    columns: `
      organisation_id uuid NOT NULL,
      address varchar(500) NOT NULL,
      user_name varchar(200) NOT NULL,
      secret varchar(1000) NOT NULL,
      active tinyint NOT NULL,
      changed_by uuid NOT NULL,
      changed_at datetime(3) NOT NULL,
      PRIMARY KEY (organisation_id),
      CONSTRAINT fk_statement_endpoint_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id),
      CONSTRAINT fk_statement_endpoint_changer FOREIGN KEY (changed_by) REFERENCES person (id)`,
  },
  {
    // The identifier is the statement's own, so the same statement cannot wait twice.
    name: 'statement_delivery',
    columns: `
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      attempt_id uuid NOT NULL,
      statement json NOT NULL,
      state enum ('waiting', 'sent', 'refused') NOT NULL,
      tries int UNSIGNED NOT NULL,
      next_at datetime(3) NOT NULL,
      problem varchar(500) NOT NULL,
      created_at datetime(3) NOT NULL,
      sent_at datetime(3) NULL,
      PRIMARY KEY (id),
      INDEX ix_statement_delivery_next (state, next_at),
      INDEX ix_statement_delivery_organisation (organisation_id, state),
      CONSTRAINT fk_statement_delivery_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id)`,
  },
  {
    name: 'retention_rule',
    columns: `
      organisation_id uuid NOT NULL,
      recording_days int UNSIGNED NULL,
      changed_by uuid NOT NULL,
      changed_at datetime(3) NOT NULL,
      PRIMARY KEY (organisation_id),
      CONSTRAINT fk_retention_rule_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id),
      CONSTRAINT fk_retention_rule_changer FOREIGN KEY (changed_by) REFERENCES person (id)`,
  },
  {
    name: 'recording_removal',
    columns: `
      attempt_id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      chunk_count int UNSIGNED NOT NULL,
      removed_at datetime(3) NOT NULL,
      PRIMARY KEY (attempt_id),
      CONSTRAINT fk_recording_removal_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id)`,
  },
];

/** What must hold whoever writes: corrections, extensions and counted tries are entries that never change. */
const APPEND_ONLY: readonly [table: string, what: string][] = [
  ['record_correction', 'A correction'],
  ['assignment_extension', 'An extension'],
  ['assignment_attempt', 'A counted try'],
  ['recording_removal', 'The note of a removal'],
];

export class Assignments1764547700000 implements MigrationInterface {
  readonly name = 'Assignments1764547700000';

  async up(runner: QueryRunner): Promise<void> {
    for (const { name, columns } of TABLES) await runner.query(`CREATE TABLE ${name} (${columns}) ${OPTIONS}`);
    for (const [table, what] of APPEND_ONLY) {
      for (const [name, moment, deed] of [
        ['keep', 'UPDATE', 'changes'],
        ['stay', 'DELETE', 'is deleted'],
      ]) {
        await runner.query(`CREATE TRIGGER ${table}_${name} BEFORE ${moment} ON ${table} FOR EACH ROW
          SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = '${what} never ${deed}.'`);
      }
    }
    await runner.query('ALTER TABLE attempt_result ADD first_pedal_s double NULL');
    await runner.query(
      'CREATE INDEX ix_attempt_result_record ON attempt_result (attempt_id, counts, passed, verdict, first_pedal_s)',
    );
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP INDEX ix_attempt_result_record ON attempt_result');
    await runner.query('ALTER TABLE attempt_result DROP COLUMN first_pedal_s');
    for (const { name } of [...TABLES].reverse()) await runner.query(`DROP TABLE ${name}`);
  }
}
