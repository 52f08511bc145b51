import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';
const NO_ACTION = 'ON DELETE NO ACTION ON UPDATE NO ACTION';

const KEPT = [
  'id',
  'organisation_id',
  'person_id',
  'scenario_id',
  'scenario_revision_id',
  'number',
  'seed',
  'drawn',
  'chunk_key',
  'model_version',
  'started_at',
];

/** Classes: their logs, members and attempts. A guest's attempt has no person. */
export class Classes1764547500000 implements MigrationInterface {
  readonly name = 'Classes1764547500000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`CREATE TABLE live_class (
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      instructor_id uuid NOT NULL,
      title varchar(120) NOT NULL,
      join_code varchar(6) NULL,
      guests tinyint NOT NULL,
      open_key uuid NULL,
      last_seq int UNSIGNED NOT NULL,
      refused int UNSIGNED NOT NULL,
      opened_at datetime(3) NOT NULL,
      ended_at datetime(3) NULL,
      PRIMARY KEY (id),
      INDEX ix_live_class_opened (organisation_id, opened_at),
      UNIQUE INDEX ux_live_class_open_key (instructor_id, open_key),
      UNIQUE INDEX ux_live_class_join_code (join_code),
      CONSTRAINT fk_live_class_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id) ${NO_ACTION},
      CONSTRAINT fk_live_class_instructor FOREIGN KEY (instructor_id) REFERENCES person (id) ${NO_ACTION}
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE class_entry (
      class_id uuid NOT NULL,
      seq int UNSIGNED NOT NULL,
      at datetime(3) NOT NULL,
      kind varchar(20) NOT NULL,
      by_member uuid NULL,
      deed_key uuid NULL,
      body json NOT NULL,
      PRIMARY KEY (class_id, seq),
      UNIQUE INDEX ux_class_entry_deed (class_id, deed_key),
      CONSTRAINT fk_class_entry_class FOREIGN KEY (class_id) REFERENCES live_class (id) ${NO_ACTION}
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE class_member (
      id uuid NOT NULL,
      class_id uuid NOT NULL,
      person_id uuid NULL,
      name varchar(120) NOT NULL,
      created_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      UNIQUE INDEX ux_class_member_person (class_id, person_id),
      CONSTRAINT fk_class_member_class FOREIGN KEY (class_id) REFERENCES live_class (id) ${NO_ACTION},
      CONSTRAINT fk_class_member_person FOREIGN KEY (person_id) REFERENCES person (id) ${NO_ACTION}
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE class_attempt (
      attempt_id uuid NOT NULL,
      class_id uuid NOT NULL,
      run int UNSIGNED NOT NULL,
      member_id uuid NOT NULL,
      demonstration tinyint NOT NULL,
      PRIMARY KEY (attempt_id),
      UNIQUE INDEX ux_class_attempt_run (class_id, run, member_id),
      CONSTRAINT fk_class_attempt_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id) ${NO_ACTION},
      CONSTRAINT fk_class_attempt_class FOREIGN KEY (class_id) REFERENCES live_class (id) ${NO_ACTION}
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE throttle_count (
      throttle_key varchar(80) NOT NULL,
      window_start datetime(3) NOT NULL,
      count int UNSIGNED NOT NULL,
      PRIMARY KEY (throttle_key, window_start)
    ) ${OPTIONS}`);
    await runner.query('ALTER TABLE attempt MODIFY person_id uuid NULL, ADD guest_id uuid NULL AFTER person_id');
    await runner.query(
      `ALTER TABLE attempt ADD CONSTRAINT fk_attempt_guest FOREIGN KEY (guest_id) REFERENCES class_member (id) ${NO_ACTION}`,
    );
    await this.guardAttempt(runner, [...KEPT, 'guest_id']);
    for (const [name, moment, message] of [
      ['class_entry_keep', 'BEFORE UPDATE', 'An entry of a class never changes.'],
      ['class_entry_stay', 'BEFORE DELETE', 'An entry of a class is never deleted.'],
    ])
      await runner.query(
        `CREATE TRIGGER ${name} ${moment} ON class_entry FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = '${message}'`,
      );
  }

  async down(runner: QueryRunner): Promise<void> {
    await this.guardAttempt(runner, KEPT);
    await runner.query('ALTER TABLE attempt DROP FOREIGN KEY fk_attempt_guest');
    await runner.query('ALTER TABLE attempt DROP COLUMN guest_id, MODIFY person_id uuid NOT NULL');
    for (const table of ['throttle_count', 'class_attempt', 'class_member', 'class_entry', 'live_class'])
      await runner.query(`DROP TABLE ${table}`);
  }

  private async guardAttempt(runner: QueryRunner, columns: readonly string[]): Promise<void> {
    const changed = columns.map((column) => `NOT (OLD.${column} <=> NEW.${column})`).join(' OR ');
    await runner.query('DROP TRIGGER attempt_keep');
    await runner.query(`CREATE TRIGGER attempt_keep BEFORE UPDATE ON attempt FOR EACH ROW
      BEGIN IF OLD.status = 'complete' OR ${changed} THEN SIGNAL SQLSTATE '45000'
      SET MESSAGE_TEXT = 'What an attempt was started with never changes, nor does a completed attempt.'; END IF; END`);
  }
}
