import { createHash, createHmac, randomBytes, randomInt, timingSafeEqual } from 'node:crypto';

const seal = (secret: string, text: string): string => createHmac('sha256', secret).update(`refresh\n${text}`).digest('base64url');

/** 256 random bits for a refresh cookie, with the session they are for and a seal on both. */
export function newRefreshToken(secret: string, sessionId: string): string {
  const text = `${newToken()}.${sessionId}`;
  return `${text}.${seal(secret, text)}`;
}

/** The session that a token was issued for, be it used up or not; null for what was never issued here. */
export function sessionOfToken(secret: string, token: string): string | null {
  const at = token.lastIndexOf('.');
  const [text, given] = [token.slice(0, at), Buffer.from(token.slice(at + 1))];
  const expected = Buffer.from(seal(secret, text));
  return given.length === expected.length && timingSafeEqual(given, expected) ? (text.split('.')[1] ?? null) : null;
}

/** 256 random bits. */
export const newToken = (): string => randomBytes(32).toString('base64url');
/** What is stored of a token; a plain hash is enough for 256 random bits. */
export const tokenHash = (token: string): Buffer => createHash('sha256').update(token).digest();

/** Six digits from a cryptographic source. */
export const newCode = (): string => String(randomInt(0, 1_000_000)).padStart(6, '0');
/** What is stored of a code: an HMAC bound to the address, since six digits alone could be searched through. */
export const codeHash = (secret: string, email: string, code: string): Buffer => createHmac('sha256', secret).update(`${email}\n${code}`).digest();

// no I, L, O or U: what looks alike is read as its digit
const LETTERS = '0123456789ABCDEFGHJKMNPQRSTVWXYZ';
/** Fifty random bits as ten letters and digits, easy to read out. */
export const newRecoveryCode = (): string => Array.from(randomBytes(10), (byte) => LETTERS[byte & 31]).join('');
