import type { MigrationInterface, QueryRunner } from 'typeorm';

/** A result says how often the flight was rewound. */
export class Rewinds1764547350000 implements MigrationInterface {
  readonly name = 'Rewinds1764547350000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE attempt_result ADD COLUMN rewinds int UNSIGNED NOT NULL DEFAULT 0');
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE attempt_result DROP COLUMN rewinds');
  }
}
