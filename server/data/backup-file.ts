import { once } from 'node:events';
import { createReadStream, createWriteStream } from 'node:fs';
import { rename, rm } from 'node:fs/promises';
import path from 'node:path';
import { createInterface } from 'node:readline';
import { createGunzip, createGzip } from 'node:zlib';
import { createConnection } from 'mysql2';
import type { Connection } from 'mysql2/promise';
import { z } from 'zod';

const FORMAT = 1;
const ROWS_AT_ONCE = 200;
const BINARY = new Set(['binary', 'varbinary', 'tinyblob', 'blob', 'mediumblob', 'longblob']);

/** Lines of a backup: a heading, then for each table its definition and rows, the triggers, and how many rows there were. */
const lineSchema = z.union([
  z.strictObject({ sidewashBackup: z.literal(FORMAT), program: z.string(), madeAt: z.string() }),
  z.strictObject({ table: z.string(), create: z.string(), columns: z.array(z.string()), binary: z.array(z.boolean()) }),
  z.strictObject({ rows: z.array(z.array(z.string().nullable())) }),
  z.strictObject({ trigger: z.string(), create: z.string() }),
  z.strictObject({ end: z.number().int() }),
]);
type Line = z.infer<typeof lineSchema>;

export class BackupProblem extends Error {
  constructor(problem: string, remedy: string) {
    super(`${problem}; ${remedy}.`);
    this.name = 'BackupProblem';
  }
}

const named = (identifier: string): string => `\`${identifier.replaceAll('`', '``')}\``;

/** Every value as the text the database writes; dates and numbers come back as they were. */
function open(url: string) {
  const raw = createConnection({
    uri: url,
    charset: 'utf8mb4_unicode_ci',
    timezone: 'Z',
    typeCast: (field) => field.string(),
  });
  return { raw, connection: raw.promise() };
}

const textRows = async (connection: Connection, sql: string, values: unknown[] = []): Promise<(string | null)[][]> => {
  const [rows] = await connection.query({ sql, rowsAsArray: true }, values);
  return z.array(z.array(z.string().nullable())).parse(rows);
};
const tablesOf = async (connection: Connection): Promise<string[]> =>
  (
    await textRows(
      connection,
      `SELECT table_name FROM information_schema.tables
       WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE' ORDER BY table_name`,
    )
  ).flatMap(([name]) => (name === null ? [] : [name]));

/**
 * Writes all tables and triggers as of one moment to `file` (gzip, one JSON text a line), while others go on working.
 * The file appears under its name only when it is whole.
 *
 * @param progress called with the table at work and the rows written so far
 */
export async function writeBackup(setup: {
  url: string;
  file: string;
  program: string;
  progress?: (table: string, rows: number) => void;
}): Promise<{ tables: number; rows: number }> {
  const { url, file, program, progress = () => {} } = setup;
  const draft = `${file}.part`;
  const { raw, connection } = open(url);
  const zip = createGzip();
  const out = zip.pipe(createWriteStream(draft, { mode: 0o600 }));
  const written = once(out, 'close');
  let rows = 0;
  const say = async (line: Line): Promise<void> => {
    if (!zip.write(`${JSON.stringify(line)}\n`)) await once(zip, 'drain');
  };
  try {
    await connection.query('SET SESSION TRANSACTION ISOLATION LEVEL REPEATABLE READ');
    await connection.query('START TRANSACTION WITH CONSISTENT SNAPSHOT');
    await say({ sidewashBackup: FORMAT, program, madeAt: new Date().toISOString() });
    const tables = await tablesOf(connection);
    for (const table of tables) {
      const [[, create]] = await textRows(connection, `SHOW CREATE TABLE ${named(table)}`);
      const described = await textRows(
        connection,
        `SELECT column_name, data_type FROM information_schema.columns
         WHERE table_schema = DATABASE() AND table_name = ? AND is_generated = 'NEVER' ORDER BY ordinal_position`,
        [table],
      );
      const columns = described.map(([name]) => name ?? '');
      const binary = described.map(([, type]) => BINARY.has(type ?? ''));
      await say({ table, create: create ?? '', columns, binary });
      const chosen = columns.map((name, i) => (binary[i] ? `TO_BASE64(${named(name)})` : named(name))).join(', ');
      const stream = raw.query({ sql: `SELECT ${chosen} FROM ${named(table)}`, rowsAsArray: true }).stream();
      let held: (string | null)[][] = [];
      for await (const row of stream) {
        held.push(z.array(z.string().nullable()).parse(row));
        rows++;
        if (held.length < ROWS_AT_ONCE) continue;
        await say({ rows: held });
        held = [];
      }
      if (held.length > 0) await say({ rows: held });
      progress(table, rows);
    }
    for (const [trigger] of await textRows(
      connection,
      'SELECT trigger_name FROM information_schema.triggers WHERE trigger_schema = DATABASE() ORDER BY trigger_name',
    )) {
      const [[name, , create]] = await textRows(connection, `SHOW CREATE TRIGGER ${named(trigger ?? '')}`);
      await say({ trigger: name ?? '', create: create ?? '' });
    }
    await say({ end: rows });
    zip.end();
    await written;
    await rename(draft, file);
    return { tables: tables.length, rows };
  } catch (error) {
    zip.destroy();
    await rm(draft, { force: true });
    throw error;
  } finally {
    await connection.end();
  }
}

/** Writes into the audit trail of each organisation that a backup was made. */
export async function noteBackup(setup: { url: string; file: string; bytes: number; rows: number }): Promise<void> {
  const { url, file, bytes, rows } = setup;
  const { connection } = open(url);
  try {
    await connection.query(
      `INSERT INTO audit_entry (organisation_id, at, actor_id, deed, subject_kind, subject_id, detail, address)
       SELECT id, UTC_TIMESTAMP(3), NULL, 'backup.written', 'backup', ?, ?, NULL FROM organisation`,
      [path.basename(file).slice(0, 80), JSON.stringify({ bytes, rows })],
    );
  } finally {
    await connection.end();
  }
}

/** The statement without the account that made the trigger: the restoring account makes it its own. */
const withoutDefiner = (create: string): string =>
  create.replace(/\sDEFINER\s*=\s*(?:`[^`]*`|'[^']*'|\S+?)@(?:`[^`]*`|'[^']*'|\S+)/i, '');

/**
 * Reads a backup into the empty database at `url`.
 *
 * @throws {BackupProblem} when the database holds tables, or the file is no whole backup; then nothing is left of it
 */
export async function readBackup(setup: {
  url: string;
  file: string;
  progress?: (table: string, rows: number) => void;
}): Promise<{ tables: number; rows: number }> {
  const { url, file, progress = () => {} } = setup;
  const { connection } = open(url);
  let current: Extract<Line, { table: string }> | null = null;
  let [tables, rows, whole, begun] = [0, 0, false, false];
  try {
    if ((await tablesOf(connection)).length > 0) {
      throw new BackupProblem('The database to restore into holds tables already', 'name an empty database');
    }
    await connection.query('SET SESSION foreign_key_checks = 0');
    await connection.query('SET SESSION unique_checks = 0');
    const source = createReadStream(file);
    const unzip = createGunzip();
    source.on('error', (error) => unzip.destroy(error));
    for await (const text of createInterface({ input: source.pipe(unzip), crlfDelay: Infinity })) {
      const line = lineSchema.parse(JSON.parse(text));
      if (!begun && !('sidewashBackup' in line)) throw new BackupProblem('The file is no backup', 'name another file');
      begun = true;
      if ('table' in line) {
        current = line;
        tables++;
        await connection.query(line.create);
      } else if ('rows' in line && current) {
        const marks = `(${current.binary.map((is) => (is ? 'FROM_BASE64(?)' : '?')).join(', ')})`;
        await connection.query(
          `INSERT INTO ${named(current.table)} (${current.columns.map(named).join(', ')})
           VALUES ${line.rows.map(() => marks).join(', ')}`,
          line.rows.flat(),
        );
        rows += line.rows.length;
        progress(current.table, rows);
      } else if ('trigger' in line) await connection.query(withoutDefiner(line.create));
      else if ('end' in line) whole = line.end === rows;
    }
    if (!whole) throw new BackupProblem('The backup ends early', 'take the file anew or another one');
    return { tables, rows };
  } catch (error) {
    if (begun) {
      for (const table of await tablesOf(connection)) await connection.query(`DROP TABLE ${named(table)}`);
    }
    if (error instanceof BackupProblem) throw error;
    const why = error instanceof Error ? error.message.split('\n')[0] : String(error);
    throw new BackupProblem(`The backup cannot be read (${why})`, 'take the file anew or another one');
  } finally {
    await connection.end();
  }
}
