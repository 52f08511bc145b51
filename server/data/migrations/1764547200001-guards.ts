import type { MigrationInterface, QueryRunner } from 'typeorm';

interface Guard {
  name: string;
  table: string;
  moment: 'BEFORE UPDATE' | 'BEFORE DELETE';
  /** The change is refused when this holds; always when absent. */
  when?: string;
  message: string;
}

/** True when any of the columns changes; compares nulls and, for JSON, every byte. */
const changed = (...columns: string[]) => columns.map((column) => `NOT (OLD.${column} <=> NEW.${column})`).join(' OR ');

/** What must hold whoever writes to the tables. */
const GUARDS: readonly Guard[] = [
  {
    name: 'airframe_revision_keep',
    table: 'airframe_revision',
    moment: 'BEFORE UPDATE',
    when: `OLD.status <> 'draft' AND (NEW.status = 'draft' OR ${changed(
      'id',
      'organisation_id',
      'airframe_id',
      'number',
      'name',
      'airplane_class',
      'engine_count',
      'document',
      'note',
      'created_by',
      'created_at',
      'released_by',
      'released_at',
    )})`,
    message: 'A released airframe revision never changes.',
  },
  {
    name: 'airframe_revision_stay',
    table: 'airframe_revision',
    moment: 'BEFORE DELETE',
    when: `OLD.status <> 'draft'`,
    message: 'A released airframe revision is never deleted.',
  },
  {
    name: 'scenario_revision_keep',
    table: 'scenario_revision',
    moment: 'BEFORE UPDATE',
    when: `OLD.status <> 'draft' AND (NEW.status = 'draft' OR ${changed(
      'id',
      'organisation_id',
      'scenario_id',
      'number',
      'title',
      'summary',
      'purpose',
      'duration_s',
      'criterion_count',
      'lanes',
      'document',
      'airframe_revision_id',
      'note',
      'created_by',
      'created_at',
      'published_by',
      'published_at',
    )})`,
    message: 'A published scenario revision never changes.',
  },
  {
    name: 'scenario_revision_stay',
    table: 'scenario_revision',
    moment: 'BEFORE DELETE',
    when: `OLD.status <> 'draft'`,
    message: 'A published scenario revision is never deleted.',
  },
  {
    name: 'attempt_keep',
    table: 'attempt',
    moment: 'BEFORE UPDATE',
    when: `OLD.status = 'complete' OR ${changed(
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
    )}`,
    message: 'What an attempt was started with never changes, nor does a completed attempt.',
  },
  {
    name: 'attempt_chunk_keep',
    table: 'attempt_chunk',
    moment: 'BEFORE UPDATE',
    message: 'A stored chunk never changes.',
  },
  {
    name: 'attempt_result_keep',
    table: 'attempt_result',
    moment: 'BEFORE UPDATE',
    message: 'A result never changes.',
  },
  {
    name: 'audit_entry_keep',
    table: 'audit_entry',
    moment: 'BEFORE UPDATE',
    message: 'The audit trail is append-only.',
  },
  {
    name: 'audit_entry_stay',
    table: 'audit_entry',
    moment: 'BEFORE DELETE',
    message: 'The audit trail is append-only.',
  },
];

export class Guards1764547200001 implements MigrationInterface {
  readonly name = 'Guards1764547200001';

  async up(runner: QueryRunner): Promise<void> {
    for (const { name, table, moment, when, message } of GUARDS) {
      const refuse = `SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = '${message}'`;
      const body = when === undefined ? refuse : `BEGIN IF ${when} THEN ${refuse}; END IF; END`;
      await runner.query(`CREATE TRIGGER ${name} ${moment} ON ${table} FOR EACH ROW ${body}`);
    }
  }

  async down(runner: QueryRunner): Promise<void> {
    for (const { name } of GUARDS) await runner.query(`DROP TRIGGER ${name}`);
  }
}
