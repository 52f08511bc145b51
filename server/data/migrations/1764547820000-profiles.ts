import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';

/** What a person keeps of their own, changes of address by link, archived cohorts, and the mark of a finished set-up. */
export class Profiles1764547820000 implements MigrationInterface {
  readonly name = 'Profiles1764547820000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`ALTER TABLE person
      ADD COLUMN units enum ('aviation', 'si') NULL,
      ADD COLUMN time_zone varchar(64) NULL`);
    await runner.query(`ALTER TABLE account_link
      MODIFY kind enum ('invitation', 'reset', 'address') NOT NULL,
      ADD COLUMN new_email varchar(254) NULL`);
    await runner.query('ALTER TABLE cohort ADD COLUMN archived_at datetime(3) NULL');
    // One row at most: of two first set-ups at once, the second waits here and is refused.
    await runner.query(`CREATE TABLE first_set_up (
      id tinyint UNSIGNED NOT NULL,
      organisation_id uuid NOT NULL,
      at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      CONSTRAINT ck_first_set_up CHECK (id = 1),
      CONSTRAINT fk_first_set_up_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id)
    ) ${OPTIONS}`);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TABLE first_set_up');
    await runner.query('ALTER TABLE cohort DROP COLUMN archived_at');
    await runner.query(`DELETE FROM account_link WHERE kind = 'address'`);
    await runner.query(`ALTER TABLE account_link
      DROP COLUMN new_email, MODIFY kind enum ('invitation', 'reset') NOT NULL`);
    await runner.query('ALTER TABLE person DROP COLUMN units, DROP COLUMN time_zone');
  }
}
