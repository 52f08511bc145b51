import path from 'node:path';
import { prepareDataFolder } from '../../server/bootstrap/data-folder.mjs';
import { InstanceLock } from '../../server/bootstrap/instance-lock.mjs';
import { startMariadb } from '../../server/bootstrap/mariadb.mjs';
import { projectFolder } from '../../server/bootstrap/paths.mjs';

/**
 * Gives the integration tests a real MariaDB in DATABASE_URL: the one that is named there already, or a private one
 * with its own data folder (.cache/test-data; SIDEWASH_TEST_DATA names another) that is stopped at the end.
 * Its account may create databases whose names begin with "sidewash"; each test file makes and drops its own.
 */
export default async function setUp(): Promise<(() => Promise<void>) | undefined> {
  if (process.env.DATABASE_URL) return undefined;
  const dataFolder = process.env.SIDEWASH_TEST_DATA ?? path.join(projectFolder, '.cache', 'test-data');
  prepareDataFolder(dataFolder);
  const lock = new InstanceLock(dataFolder);
  await lock.take();
  const mariadb = await startMariadb({ dataFolder, durable: false, say: (text) => console.log(text) });
  process.env.DATABASE_URL = mariadb.url;
  return async () => {
    await mariadb.stop();
    lock.release();
    delete process.env.DATABASE_URL;
  };
}
