import { randomUUID } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { mkdir } from 'node:fs/promises';
import path from 'node:path';
import { pipeline } from 'node:stream/promises';
import { SMTPServer } from 'smtp-server';

export interface LocalSink {
  /** Where a courier sends. */
  url: string;
  folder: string;
  close(): Promise<void>;
}

/** An SMTP server on loopback that keeps every message as a file (.eml) in `folder` and passes nothing on. */
export async function startLocalSink(folder: string): Promise<LocalSink> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    onData(stream, _session, callback) {
      const name = `${new Date().toISOString().replace(/[:.]/g, '-')}-${randomUUID().slice(0, 8)}.eml`;
      pipeline(stream, createWriteStream(path.join(folder, name), { mode: 0o600 })).then(
        () => callback(),
        (error: unknown) => callback(error instanceof Error ? error : new Error(String(error))),
      );
    },
  });
  const port = await new Promise<number>((resolve, reject) => {
    server.once('error', reject);
    const listening = server.listen(0, '127.0.0.1', () => {
      const bound = listening.address();
      resolve(typeof bound === 'object' && bound !== null ? bound.port : 0);
    });
  });
  return {
    url: `smtp://127.0.0.1:${port}`,
    folder,
    close: () => new Promise((resolve) => server.close(resolve)),
  };
}
