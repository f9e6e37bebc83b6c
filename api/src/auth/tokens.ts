import { createHash, createHmac, randomBytes, randomInt } from 'node:crypto';

/** 256 random bits for a refresh cookie. */
export const newRefreshToken = (): string => randomBytes(32).toString('base64url');
/** What is stored of it; a plain hash is enough for 256 random bits. */
export const refreshHash = (token: string): Buffer => createHash('sha256').update(token).digest();

/** Six digits from a cryptographic source. */
export const newCode = (): string => String(randomInt(0, 1_000_000)).padStart(6, '0');
/** What is stored of a code: an HMAC bound to the address, since six digits alone could be searched through. */
export const codeHash = (secret: string, email: string, code: string): Buffer => createHmac('sha256', secret).update(`${email}\n${code}`).digest();
