import type { AttemptDetail } from '#shared/contracts/attempts.ts';
import { branchesOf, runsOf } from '#shared/scenario/class-state.ts';
import type { Database } from '../../data/database.ts';

/** The class in which an attempt was flown, with its events; undefined for one flown alone. */
export async function flownIn(database: Database, id: string): Promise<AttemptDetail['liveClass']> {
  const record = await database.classes.findAttempt(id);
  const liveClass = record === null ? null : await database.classes.find(record.classId);
  if (record === null || liveClass === null) return undefined;
  const run = runsOf(await database.classes.entries(record.classId))[record.run - 1];
  return { id: liveClass.id, title: liveClass.title, run: record.run, branches: branchesOf(run) };
}
