import { createSecretKey } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { z } from 'zod';

export const ACCESS_TOKEN_S = 600;
const ISSUER = 'sidewash';
const AUDIENCE = 'sidewash-web';

const claimsSchema = z.object({ sub: z.uuid(), sid: z.uuid() });

export type AccessCheck =
  { state: 'valid'; personId: string; sessionId: string } | { state: 'expired' } | { state: 'invalid' };

/** Signs and checks the short-lived token that names person and session; roles are read afresh for each request. */
export function createAccessTokens(secret: string, now: () => Date) {
  // As a key, not as text: with text the library first tries to read a public key from it, at every request.
  const key = createSecretKey(Buffer.from(secret));
  const seconds = () => Math.floor(now().getTime() / 1000);
  return {
    sign(personId: string, sessionId: string): string {
      const iat = seconds();
      return jwt.sign({ sid: sessionId, iat, exp: iat + ACCESS_TOKEN_S }, key, {
        algorithm: 'HS256',
        subject: personId,
        issuer: ISSUER,
        audience: AUDIENCE,
      });
    },

    check(token: string): AccessCheck {
      try {
        const payload = jwt.verify(token, key, {
          algorithms: ['HS256'],
          issuer: ISSUER,
          audience: AUDIENCE,
          clockTimestamp: seconds(),
        });
        const claims = claimsSchema.safeParse(payload);
        if (!claims.success) return { state: 'invalid' };
        return { state: 'valid', personId: claims.data.sub, sessionId: claims.data.sid };
      } catch (error) {
        return error instanceof jwt.TokenExpiredError ? { state: 'expired' } : { state: 'invalid' };
      }
    },
  };
}

export type AccessTokens = ReturnType<typeof createAccessTokens>;
