import type { MigrationInterface, QueryRunner } from 'typeorm';

/** Messages of assignments, written with the deed that causes them and waiting to be taken by the mail queue. */
export class NoticeMail1764547710000 implements MigrationInterface {
  readonly name = 'NoticeMail1764547710000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`CREATE TABLE notice_mail (
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      person_id uuid NOT NULL,
      email varchar(254) NOT NULL,
      subject varchar(300) NOT NULL,
      text text NOT NULL,
      calendar_method enum ('REQUEST', 'CANCEL') NULL,
      calendar text NULL,
      created_at datetime(3) NOT NULL,
      handed_at datetime(3) NULL,
      PRIMARY KEY (id),
      INDEX ix_notice_mail_waiting (handed_at, created_at),
      CONSTRAINT fk_notice_mail_person FOREIGN KEY (person_id) REFERENCES person (id)
    ) ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE notice_mail');
  }
}
