import ky, { type KyInstance } from 'ky';
import { isOutdated, noteBuild } from './build.ts';
import { offline, outdated, Problem, problemOf } from './problem.ts';
import { renewSession, sessionEnded } from './session.ts';

/** Absolute, since a relative prefix isn't taken outside of a browser's address bar. */
const prefixUrl = () => new URL('/api', window.location.origin).href;

const client = (): KyInstance => ky.create({ prefixUrl: prefixUrl(), credentials: 'same-origin', retry: 0, timeout: 30_000, throwHttpErrors: false });

export interface Sending {
  /** Made when the form opened; the server acts once per key. */
  idempotencyKey?: string;
  signal?: AbortSignal;
}

/** Reads JSON. Throws Problem. */
export const get = <T>(path: string, signal?: AbortSignal): Promise<T> => call<T>((http) => http.get(path, signal ? { signal } : {}));

/** Sends JSON. Throws Problem. */
export const post = <T>(path: string, json: object, sending: Sending = {}): Promise<T> => act<T>(path, (http) => http.post(path, { json, ...options(sending) }));

/** Sends a form with files. Throws Problem. */
export const postForm = <T>(path: string, body: FormData, sending: Sending = {}): Promise<T> =>
  act<T>(path, (http) => http.post(path, { body, ...options(sending), timeout: 300_000 }));

function options({ idempotencyKey, signal }: Sending) {
  return { ...(idempotencyKey ? { headers: { 'Idempotency-Key': idempotencyKey } } : {}), ...(signal ? { signal } : {}) };
}

/** What an older page sends may no longer mean what it shows; only coming and going is always possible. */
async function act<T>(path: string, send: (http: KyInstance) => Promise<Response>): Promise<T> {
  if (isOutdated() && !path.startsWith('auth/')) throw outdated();
  return await call<T>(send);
}

async function call<T>(send: (http: KyInstance) => Promise<Response>): Promise<T> {
  const response = await answered(() => attempt(send));
  noteBuild(response.headers.get('Build-Id'));
  if (!response.ok) throw await problemOf(response);
  return (response.status === 204 ? undefined : await response.json()) as T;
}

/** Sends; where the session ran out, renews it and sends once more; where that fails too, whoever shows the pages is told. */
export async function answered(send: () => Promise<Response>): Promise<Response> {
  const askedAt = Date.now();
  const first = await send();
  if (first.status !== 401) return first;
  const second = (await renewSession(askedAt, refresh)) ? await send() : first;
  if (second.status === 401) sessionEnded();
  return second;
}

/** A server that is busy or doesn't answer has ended no session. */
async function refresh(): Promise<boolean> {
  const response = await attempt((http) => http.post('auth/refresh', { json: {} }));
  if (!response.ok && response.status !== 401) throw await problemOf(response);
  return response.ok;
}

async function attempt(send: (http: KyInstance) => Promise<Response>): Promise<Response> {
  try {
    return await send(client());
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw error instanceof Problem ? error : offline();
  }
}
