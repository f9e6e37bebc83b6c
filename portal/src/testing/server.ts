import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';

export interface Received {
  method: string;
  path: string;
  key: string | undefined;
  body: string;
}

/** Answers a request, given what came. */
export type Answer = (received: Received, response: ServerResponse) => void;

/** A server for one test, and the page's address on it. */
export async function serve(answer: Answer): Promise<{ received: Received[]; close: () => Promise<void> }> {
  const received: Received[] = [];
  const server = createServer((request, response) => {
    void read(request).then((got) => {
      received.push(got);
      answer(got, response);
    });
  });
  await new Promise<void>((done) => server.listen(0, '127.0.0.1', done));
  const { port } = server.address() as AddressInfo;
  (window as unknown as { happyDOM: { setURL: (url: string) => void } }).happyDOM.setURL(`http://127.0.0.1:${port}/`);
  return {
    received,
    close: () =>
      new Promise((done) => {
        server.closeAllConnections();
        server.close(() => done());
      }),
  };
}

async function read(request: IncomingMessage): Promise<Received> {
  const parts: Buffer[] = [];
  for await (const part of request) parts.push(part as Buffer);
  const key = request.headers['idempotency-key'];
  return { method: request.method ?? '', path: request.url ?? '', key: typeof key === 'string' ? key : undefined, body: Buffer.concat(parts).toString() };
}

/** An answer with JSON. */
export function json(response: ServerResponse, status: number, body: object | null, headers: Record<string, string> = {}): void {
  response.writeHead(status, { 'Content-Type': status < 400 ? 'application/json' : 'application/problem+json', ...headers });
  response.end(status === 204 || body === null ? undefined : JSON.stringify(body));
}

/** The body of a refusal, as the server sends it. */
export const refusal = (code: string, status: number, more: object = {}) => ({ type: `urn:tallypole:problem:${code}`, title: code, status, code, ...more });
