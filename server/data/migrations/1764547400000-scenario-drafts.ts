import type { MigrationInterface, QueryRunner } from 'typeorm';

/** Drafts of scenarios know who changed them last and which version that was. */
export class ScenarioDrafts1764547400000 implements MigrationInterface {
  readonly name = 'ScenarioDrafts1764547400000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`ALTER TABLE scenario_revision
      ADD COLUMN version int UNSIGNED NOT NULL DEFAULT 1,
      ADD COLUMN changed_by uuid NULL,
      ADD CONSTRAINT fk_scenario_revision_changer FOREIGN KEY (changed_by) REFERENCES person (id) ON DELETE NO ACTION ON UPDATE NO ACTION`);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE scenario_revision DROP FOREIGN KEY fk_scenario_revision_changer');
    await runner.query('ALTER TABLE scenario_revision DROP COLUMN changed_by, DROP COLUMN version');
  }
}
