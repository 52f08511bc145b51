import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';

/** Remarks and signatures on attempts. A remark may only be withdrawn, a signature never changes. */
export class Debrief1764547250000 implements MigrationInterface {
  readonly name = 'Debrief1764547250000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`CREATE TABLE remark (
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      attempt_id uuid NOT NULL,
      author_id uuid NOT NULL,
      tick int UNSIGNED NOT NULL,
      text text NOT NULL,
      created_at datetime(3) NOT NULL,
      withdrawn_at datetime(3) NULL,
      PRIMARY KEY (id),
      INDEX ix_remark_attempt (attempt_id, tick),
      CONSTRAINT fk_remark_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id) ON DELETE NO ACTION ON UPDATE NO ACTION,
      CONSTRAINT fk_remark_author FOREIGN KEY (author_id) REFERENCES person (id) ON DELETE NO ACTION ON UPDATE NO ACTION
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE sign_off (
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      attempt_id uuid NOT NULL,
      signer_id uuid NOT NULL,
      kind enum ('sign-off', 'counter-signature') NOT NULL,
      verdict enum ('met', 'not-met') NOT NULL,
      note text NOT NULL,
      created_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      INDEX ix_sign_off_attempt (attempt_id, created_at),
      CONSTRAINT fk_sign_off_attempt FOREIGN KEY (attempt_id) REFERENCES attempt (id) ON DELETE NO ACTION ON UPDATE NO ACTION,
      CONSTRAINT fk_sign_off_signer FOREIGN KEY (signer_id) REFERENCES person (id) ON DELETE NO ACTION ON UPDATE NO ACTION
    ) ${OPTIONS}`);
    const guard = (name: string, table: string, moment: string, when: string, message: string): Promise<unknown> =>
      runner.query(`CREATE TRIGGER ${name} ${moment} ON ${table} FOR EACH ROW
        IF ${when} THEN SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = '${message}'; END IF`);
    await guard(
      'remark_keep',
      'remark',
      'BEFORE UPDATE',
      'OLD.withdrawn_at IS NOT NULL OR NEW.withdrawn_at IS NULL OR NOT (OLD.text <=> NEW.text) OR NOT (OLD.tick <=> NEW.tick) OR NOT (OLD.author_id <=> NEW.author_id) OR NOT (OLD.attempt_id <=> NEW.attempt_id)',
      'A remark can only be withdrawn.',
    );
    await guard('remark_stay', 'remark', 'BEFORE DELETE', 'TRUE', 'A remark is never deleted.');
    await guard('sign_off_keep', 'sign_off', 'BEFORE UPDATE', 'TRUE', 'A signature never changes.');
    await guard('sign_off_stay', 'sign_off', 'BEFORE DELETE', 'TRUE', 'A signature is never deleted.');
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE sign_off');
    await runner.query('DROP TABLE remark');
  }
}
