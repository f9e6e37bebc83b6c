import { createHash } from 'node:crypto';
import request, { type Response } from 'supertest';
import type { Visitor } from './visitor.ts';

export interface Attachment {
  name: string;
  content: Buffer;
  type?: string;
}

/** Sends one file with its fields as a browser's form would. */
export async function upload(visitor: Visitor, path: string, fields: Record<string, string>, file?: Attachment): Promise<Response> {
  const sent = request(visitor.url).post(`/api${path}`).set('Origin', visitor.url).set('Cookie', visitor.cookie());
  for (const [name, value] of Object.entries(fields)) void sent.field(name, value);
  if (file) void sent.attach('file', file.content, { filename: file.name, contentType: file.type ?? 'application/octet-stream' });
  return await sent;
}

/** The bytes behind an address, with the headers they came with. */
export async function download(visitor: Visitor, path: string): Promise<{ status: number; headers: Headers; content: Buffer }> {
  const answer = await fetch(`${visitor.url}/api${path}`, { headers: { cookie: visitor.cookie() } });
  return { status: answer.status, headers: answer.headers, content: Buffer.from(await answer.arrayBuffer()) };
}

export const sha256 = (content: Buffer): string => createHash('sha256').update(content).digest('hex');

/** The smallest thing that a reader of PDF takes for one. */
export const pdf = (text = 'Reviewed.'): Buffer => Buffer.from(`%PDF-1.4\n% ${text}\n1 0 obj<</Type/Catalog/Pages 2 0 R>>endobj 2 0 obj<</Type/Pages/Kids[]/Count 0>>endobj\ntrailer<</Root 1 0 R>>\n%%EOF\n`);
