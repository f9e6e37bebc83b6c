import type { Response } from 'express';
import { pipeline } from 'node:stream/promises';
import { Problem } from '../common/problem.ts';
import type { FileStorage } from './file-storage.ts';

export interface Sent {
  storageKey: string;
  mediaType: string;
  bytes: number;
  /** Given for a download; without it the content is shown in place. */
  downloadAs?: string;
}

/**
 * Streams stored bytes. They never run as a page of ours: sandboxed by their own policy, not sniffed, and as a download where a name is
 * given (RFC 6266: a plain name for old readers and the whole one beside it).
 */
export async function sendStored(response: Response, storage: FileStorage, sent: Sent): Promise<void> {
  const content = await storage.get(sent.storageKey).catch((error: unknown) => {
    throw (error as NodeJS.ErrnoException).code === 'ENOENT' ? new Problem('failed', { detail: 'The file is listed but its content is missing. Tell the firm.' }) : error;
  });
  if (sent.downloadAs === undefined) response.setHeader('Content-Disposition', 'inline');
  else response.attachment(sent.downloadAs);
  response.setHeader('Content-Type', sent.mediaType);
  response.setHeader('Content-Length', sent.bytes);
  response.setHeader('X-Content-Type-Options', 'nosniff');
  response.setHeader('Content-Security-Policy', "sandbox; default-src 'none'");
  response.setHeader('Cross-Origin-Resource-Policy', 'same-origin');
  // a reader who goes away is no error of ours
  await pipeline(content, response).catch((error: unknown) => {
    if ((error as NodeJS.ErrnoException).code !== 'ERR_STREAM_PREMATURE_CLOSE') throw error;
  });
}
