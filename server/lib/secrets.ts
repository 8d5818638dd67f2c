import { createHash, randomBytes } from 'node:crypto';

/** Unguessable text for links and tokens: 256 random bits, safe in a URL. */
export const randomToken = (): string => randomBytes(32).toString('base64url');

/** What is stored in place of a link's or token's text. */
export const sha256Hex = (text: string): string => createHash('sha256').update(text).digest('hex');
