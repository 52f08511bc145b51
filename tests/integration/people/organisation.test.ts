/** Settings of the organisation reach everyone; its own words stand below the fixed caution and never replace it. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { CAUTION } from '../../../server/services/caution.ts';
import { transcriptSheet } from '../../../server/reports/transcript-sheet.ts';
import { openMailSink, type MailSink } from '../../support/mail-sink.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let mail: MailSink;
let administrator: Client;
beforeAll(async () => {
  server = await startTestServer();
  mail = await openMailSink(server.services);
  administrator = await server.client('s.virtanen');
});
afterAll(async () => {
  await mail.close();
  await server.close();
});
const SETTINGS = {
  units: 'si',
  recognitionTimeS: 1.5,
  guests: false,
  caution: 'Fly the aeroplane first. – Field School',
};

describe('the organisation', () => {
  it('is renamed and set; its settings reach everyone', async () => {
    const put = await administrator('PUT', '/api/organisation', {
      json: { name: 'Field School North', settings: SETTINGS },
    });
    expect(put.status).toBe(204);
    const trainee = await server.client('j.lindqvist');
    expect((await trainee('GET', '/api/session')).body).toMatchObject({
      organisation: { name: 'Field School North', settings: SETTINGS },
    });
    for (const [json, field] of [
      [{ name: ' ', settings: SETTINGS }, '/name'],
      [{ name: 'A', settings: { ...SETTINGS, recognitionTimeS: 0 } }, '/settings/recognitionTimeS'],
      [{ name: 'A', settings: { ...SETTINGS, caution: 'x'.repeat(301) } }, '/settings/caution'],
    ] as const) {
      const wrong = await administrator('PUT', '/api/organisation', { json });
      expect(wrong.status).toBe(422);
      expect(JSON.stringify(wrong.body)).toContain(field);
    }
  });

  it('adds its words below the fixed caution of messages', async () => {
    const rows = [{ line: 2, name: 'Ida Moe', email: 'ida@school.example', roles: '', cohort: '' }];
    await administrator('POST', '/api/people/roster', { json: { rows, invite: true } });
    const [raw] = await mail.messagesTo('ida@school.example');
    const text = raw.replace(/=C3=A9|=E2=80=93/g, '–').replaceAll('=20', ' ');
    expect(text).toContain(CAUTION);
    expect(text.indexOf('Fly the aeroplane first.')).toBeGreaterThan(text.indexOf(CAUTION));
  });

  it('adds them on every sheet, however long they are', async () => {
    const data = {
      organisation: 'A',
      number: '1',
      trainee: 'T',
      subtitle: 's',
      trace: 't',
      printed: 'p',
      totals: { scenarios: 0, met: 0, signed: 0, attempts: 0 },
      scenarios: [],
      attempts: [],
      entries: Array.from({ length: 120 }, (_, i) => `entry ${i}`),
    };
    const pages = (file: Buffer): number => file.toString('latin1').match(/\/Type \/Page\b/g)?.length ?? 0;
    const [plain, added] = await Promise.all([
      transcriptSheet({ ...data, caution: '' }),
      transcriptSheet({ ...data, caution: 'Words of the school. '.repeat(14).trim() }),
    ]);
    expect(pages(plain)).toBeGreaterThan(1);
    expect(pages(added)).toBeGreaterThanOrEqual(pages(plain));
    expect(added.length).not.toBe(plain.length);
  });
});
