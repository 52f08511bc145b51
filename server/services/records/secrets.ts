import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';

/** Seals short secrets for the database with a key derived from the installation's own secret. */
export function createSecrets(installationSecret: string) {
  const key = Buffer.from(hkdfSync('sha256', installationSecret, 'sidewash', 'stored secrets', 32));
  return {
    seal(text: string): string {
      const iv = randomBytes(12);
      const cipher = createCipheriv('aes-256-gcm', key, iv);
      const sealed = Buffer.concat([cipher.update(text, 'utf8'), cipher.final()]);
      return Buffer.concat([iv, cipher.getAuthTag(), sealed]).toString('base64');
    },
    /** Null when it was sealed by another installation or was altered. */
    open(sealed: string): string | null {
      try {
        const bytes = Buffer.from(sealed, 'base64');
        const decipher = createDecipheriv('aes-256-gcm', key, bytes.subarray(0, 12));
        decipher.setAuthTag(bytes.subarray(12, 28));
        return Buffer.concat([decipher.update(bytes.subarray(28)), decipher.final()]).toString('utf8');
      } catch {
        return null; // a wrong tag, or bytes too few for one
      }
    },
  };
}
export type Secrets = ReturnType<typeof createSecrets>;
