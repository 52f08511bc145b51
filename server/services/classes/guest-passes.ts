import { createSecretKey } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { z } from 'zod';

/** A guest's pass ends with the class, and after this time at the latest. */
export const GUEST_PASS_S = 12 * 3600;
const ISSUER = 'sidewash';
const AUDIENCE = 'sidewash-guest';
const claimsSchema = z.object({ sub: z.uuid(), cid: z.uuid() });

export interface GuestPass {
  classId: string;
  memberId: string;
}

/** Signs and checks the token that names a guest's membership; whether it still stands, the class's log says. */
export function createGuestPasses(secret: string, now: () => Date) {
  const key = createSecretKey(Buffer.from(secret));
  const seconds = () => Math.floor(now().getTime() / 1000);
  return {
    sign({ classId, memberId }: GuestPass): string {
      const iat = seconds();
      return jwt.sign({ cid: classId, iat, exp: iat + GUEST_PASS_S }, key, {
        algorithm: 'HS256',
        subject: memberId,
        issuer: ISSUER,
        audience: AUDIENCE,
      });
    },
    check(token: string | undefined): GuestPass | null {
      if (token === undefined) return null;
      try {
        const claims = claimsSchema.safeParse(
          jwt.verify(token, key, {
            algorithms: ['HS256'],
            issuer: ISSUER,
            audience: AUDIENCE,
            clockTimestamp: seconds(),
          }),
        );
        return claims.success ? { classId: claims.data.cid, memberId: claims.data.sub } : null;
      } catch {
        return null;
      }
    },
  };
}
export type GuestPasses = ReturnType<typeof createGuestPasses>;
