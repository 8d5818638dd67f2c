import jwt from 'jsonwebtoken';
import * as z from 'zod';
import { type Clock, MINUTE_MS, SECOND_MS } from '#server/lib/clock.ts';

const ALGORITHM = 'HS256';
const ISSUER = 'selvage';
const AUDIENCE = 'selvage';
const REMEMBERED = 2_000;

/** The purpose claim: whatever else may one day be signed with the secret is no session. */
const Claims = z.object({
  purpose: z.literal('session'),
  sub: z
    .string()
    .regex(/^[1-9]\d{0,15}$/)
    .transform(Number),
  jti: z.string().min(16).max(80),
  exp: z.number(),
});

export interface SessionClaims {
  userId: number;
  sessionId: string;
  /** Seconds since 1970. */
  exp: number;
}

export interface SessionJwt {
  sign(claims: SessionClaims): string;
  /** The claims of a token of ours that has not expired; null for any other text. */
  verify(token: string): SessionClaims | null;
}

/**
 * Signs and verifies session tokens. A verified token is remembered for a minute, since checking
 * the signature is the dearest part of a small request; that the session still stands is asked of
 * the database each time.
 */
export function createSessionJwt(secret: string, clock: Clock): SessionJwt {
  const remembered = new Map<string, { claims: SessionClaims; untilMs: number }>();

  function check(token: string): SessionClaims | null {
    try {
      const payload = jwt.verify(token, secret, {
        algorithms: [ALGORITHM],
        issuer: ISSUER,
        audience: AUDIENCE,
        clockTimestamp: Math.floor(clock().getTime() / SECOND_MS),
      });
      const claims = Claims.safeParse(payload);
      return claims.success
        ? { userId: claims.data.sub, sessionId: claims.data.jti, exp: claims.data.exp }
        : null;
    } catch {
      return null; // every reason is answered alike
    }
  }

  return {
    sign: ({ userId, sessionId, exp }) =>
      jwt.sign(
        { purpose: 'session', exp, iat: Math.floor(clock().getTime() / SECOND_MS) },
        secret,
        {
          algorithm: ALGORITHM,
          issuer: ISSUER,
          audience: AUDIENCE,
          subject: String(userId),
          jwtid: sessionId,
        },
      ),
    verify(token) {
      const nowMs = clock().getTime();
      const known = remembered.get(token);
      if (known && nowMs < known.untilMs) return known.claims;
      remembered.delete(token);
      const claims = check(token);
      if (claims) {
        if (remembered.size >= REMEMBERED) remembered.clear();
        remembered.set(token, {
          claims,
          untilMs: Math.min(nowMs + MINUTE_MS, claims.exp * SECOND_MS),
        });
      }
      return claims;
    },
  };
}
