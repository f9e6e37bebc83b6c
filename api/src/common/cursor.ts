import { z } from 'zod';
import { Problem } from './problem.ts';

/** A keyset cursor, opaque outside: the sort key and id of the last row handed out. */
export const encodeCursor = (key: { createdAt: string; id: string }): string => Buffer.from(JSON.stringify([key.createdAt, key.id])).toString('base64url');

const Key = z.tuple([z.iso.datetime(), z.uuid()]);

export function decodeCursor(cursor: string | undefined): { createdAt: string; id: string } | null {
  if (cursor === undefined) return null;
  try {
    const [createdAt, id] = Key.parse(JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8')));
    return { createdAt, id };
  } catch {
    throw new Problem('malformed_request', { detail: 'The list cannot be continued from there. Start it again.' });
  }
}
