import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';

/** Links of invitations and password resets, the mail queue, and the chain that seals the audit trail. */
export class PeopleMailAudit1764547800000 implements MigrationInterface {
  readonly name = 'PeopleMailAudit1764547800000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`CREATE TABLE account_link (
      token_hash char(64) NOT NULL,
      kind enum ('invitation', 'reset') NOT NULL,
      person_id uuid NOT NULL,
      created_at datetime(3) NOT NULL,
      expires_at datetime(3) NOT NULL,
      used_at datetime(3) NULL,
      PRIMARY KEY (token_hash),
      INDEX ix_account_link_person (person_id, kind, used_at),
      CONSTRAINT fk_account_link_person FOREIGN KEY (person_id) REFERENCES person (id) ON DELETE CASCADE
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE outbox_mail (
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      email varchar(254) NOT NULL,
      name varchar(200) NOT NULL,
      subject varchar(300) NOT NULL,
      text mediumtext NOT NULL,
      calendar_method enum ('REQUEST', 'CANCEL') NULL,
      calendar text NULL,
      state enum ('waiting', 'sent', 'refused') NOT NULL,
      tries int UNSIGNED NOT NULL DEFAULT 0,
      created_at datetime(3) NOT NULL,
      next_try_at datetime(3) NULL,
      sent_at datetime(3) NULL,
      last_error varchar(500) NULL,
      PRIMARY KEY (id),
      INDEX ix_outbox_mail_due (state, next_try_at),
      INDEX ix_outbox_mail_list (organisation_id, created_at),
      CONSTRAINT fk_outbox_mail_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id)
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE audit_seal (
      position bigint UNSIGNED NOT NULL AUTO_INCREMENT,
      entry_id bigint UNSIGNED NOT NULL,
      digest char(64) NOT NULL,
      sealed_at datetime(3) NOT NULL,
      PRIMARY KEY (position),
      UNIQUE INDEX ux_audit_seal_entry (entry_id)
    ) ${OPTIONS}`);
    for (const moment of ['UPDATE', 'DELETE']) {
      await runner.query(`CREATE TRIGGER audit_seal_no_${moment.toLowerCase()} BEFORE ${moment} ON audit_seal
        FOR EACH ROW SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'A seal of the audit trail never changes.'`);
    }
  }

  async down(runner: QueryRunner): Promise<void> {
    for (const table of ['audit_seal', 'outbox_mail', 'account_link']) await runner.query(`DROP TABLE ${table}`);
  }
}
