import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import { createCourier } from '../../server/mail/courier.ts';
import { startLocalSink } from '../../server/mail/local-sink.ts';
import type { Services } from '../../server/services/create-services.ts';

export interface MailSink {
  /** Sends all that is due and reads it: newest first, quoted-printable line ends undone. */
  messagesTo(email: string): Promise<string[]>;
  /** The token in the newest message to `email` that carries one. */
  linkTo(email: string): Promise<string>;
  close(): Promise<void>;
}

/** A real SMTP sink in a folder of its own, fed by the mail queue of `services`. */
export async function openMailSink(services: Services): Promise<MailSink> {
  const folder = await mkdtemp(path.join(os.tmpdir(), 'sidewash-mail-'));
  const sink = await startLocalSink(folder);
  const messagesTo = async (email: string): Promise<string[]> => {
    const courier = createCourier(sink.url, 'Sidewash <sidewash@localhost>');
    await services.sendMail(courier);
    courier.close();
    const names = (await readdir(folder)).sort().reverse();
    const all = await Promise.all(names.map((name) => readFile(path.join(folder, name), 'utf8')));
    const to = new RegExp(`^To:.*${email.replace(/[.+]/g, '\\$&')}`, 'im');
    return all.map((raw) => raw.replace(/=\r?\n/g, '')).filter((raw) => to.test(raw));
  };
  return {
    messagesTo,
    async linkTo(email) {
      for (const raw of await messagesTo(email)) {
        const found = /\/welcome\/([\w-]+)/.exec(raw);
        if (found?.[1]) return found[1];
      }
      throw new Error(`No message with a link to ${email}.`);
    },
    async close() {
      await sink.close();
      await rm(folder, { recursive: true, force: true });
    },
  };
}
