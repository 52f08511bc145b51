import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { projectFolder } from '../../../server/config/project-folder.ts';
import { seedEmptyDatabase } from '../../../server/data/seeds/seed-empty-database.ts';
import { startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let folder: string;
beforeAll(async () => {
  server = await startTestServer({ seed: false });
  folder = mkdtempSync(path.join(os.tmpdir(), 'sidewash-library-'));
  cpSync(path.join(projectFolder, 'scenarios'), folder, { recursive: true });
});
afterAll(async () => {
  rmSync(folder, { recursive: true, force: true });
  await server.close();
});

function change(file: string, edit: (document: Record<string, Record<string, unknown>>) => void): void {
  const document = JSON.parse(readFileSync(path.join(folder, file), 'utf8')) as Record<string, Record<string, unknown>>; // a shipped file
  edit(document);
  writeFileSync(path.join(folder, file), JSON.stringify(document));
}
const seed = () =>
  seedEmptyDatabase({
    database: server.database,
    folder,
    hashPassword: server.services.passwords.hash,
    now: () => new Date(),
  });
const slugs = async (table: 'airframe' | 'scenario') =>
  (await server.sql(`SELECT slug FROM ${table}`)).map((row) => String(row['slug']));

describe('a library with bad files', () => {
  it('names file, field and rule of each, and seeds the others; a second seeding changes nothing', async () => {
    change('airframes/commuter-turboprop.json', (document) => (document['mass']['mass_kg'] = -5));
    change('crosswind-gust-on-final.json', (document) => Object.assign(document, { duration_s: 1e9 }));
    writeFileSync(path.join(folder, 'engine-cut-in-the-climb.json'), '{ "format": ');
    const report = await seed();
    expect(report.seeded).toBe(true);
    const about = (file: string) => report.problems.filter((problem) => problem.includes(file)).join('\n');
    expect(about('commuter-turboprop.json')).toMatch(/mass_kg/);
    expect(about('crosswind-gust-on-final.json')).toMatch(/duration_s/);
    expect(about('engine-cut-in-the-climb.json')).toMatch(/JSON/);

    const airframes = await slugs('airframe');
    expect(airframes).toHaveLength(4);
    expect(airframes).not.toContain('commuter-turboprop');
    const scenarios = await slugs('scenario');
    expect(scenarios).toContain('left-engine-cut-after-lift-off');
    expect(scenarios).not.toContain('crosswind-gust-on-final');
    expect(scenarios).not.toContain('engine-cut-in-the-climb');
    expect(scenarios).toHaveLength(report.scenarios);

    expect(await seed()).toMatchObject({ seeded: false });
    expect(await slugs('scenario')).toHaveLength(scenarios.length);
  });
});
