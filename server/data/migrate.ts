import type { DataSource } from 'typeorm';
import { z } from 'zod';

const LOCK_NAME = 'sidewash-migrate';
const LOCK_WAIT_S = 60;

const lockAnswerSchema = z.array(z.object({ taken: z.coerce.number() })).length(1);

/**
 * Runs the migrations that have not run yet; servers starting together take turns.
 *
 * @returns Names of the migrations that ran.
 */
export async function migrate(source: DataSource): Promise<string[]> {
  const holder = source.createQueryRunner(); // the lock belongs to one connection
  try {
    const answer = lockAnswerSchema.parse(
      await holder.query('SELECT GET_LOCK(CONCAT(DATABASE(), ?), ?) AS taken', [LOCK_NAME, LOCK_WAIT_S]),
    );
    if (answer[0].taken !== 1) throw new Error('Another server is still bringing the schema up to date.');
    try {
      return (await source.runMigrations()).map((migration) => migration.name);
    } finally {
      await holder.query('SELECT RELEASE_LOCK(CONCAT(DATABASE(), ?))', [LOCK_NAME]);
    }
  } finally {
    await holder.release();
  }
}
