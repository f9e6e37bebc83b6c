import { randomBytes } from 'node:crypto';
import { hash, hashRaw, verify } from '@node-rs/argon2';

/** Argon2id (2) with 19 MiB, two passes, one lane: the first choice of OWASP's Password Storage Cheat Sheet (from memory). */
const COST = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

export const hashPassword = (password: string): Promise<string> => hash(password, COST);

/** What nobody's password is compared with, so that an unknown address takes as long as a known one. */
const decoy = hashPassword(randomBytes(24).toString('base64url'));

export async function isPassword(kept: string | undefined, entered: string): Promise<boolean> {
  const right = await verify(kept ?? (await decoy), entered);
  return right && kept !== undefined;
}

/** One salt for all recovery codes of a person, so that an entered one is hashed once. */
export const newSalt = (): Buffer => randomBytes(16);
export const hashRecoveryCode = (code: string, salt: Buffer): Promise<Buffer> => hashRaw(code, { ...COST, salt });
