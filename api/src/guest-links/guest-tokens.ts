import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits: the token of a link, or of a visit by it. */
export const newToken = (): string => randomBytes(32).toString('base64url');
/** What is stored of it; a plain hash is enough for 256 random bits. */
export const tokenHash = (token: string): Buffer => createHash('sha256').update(token).digest();

/** What a guest's code is bound to: the visit that asked for it. */
export const codeSubject = (sessionId: string): string => `guest:${sessionId}`;

/** Whom a link went to, for the record: it can be checked by who knows the salt, and says nothing once the salt is erased. */
export const whoHash = (salt: Buffer, parts: readonly string[]): string => createHash('sha256').update(salt).update(parts.join('\n')).digest('hex');
