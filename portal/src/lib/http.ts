import ky, { type KyInstance } from 'ky';
import { offline, Problem, problemOf } from './problem.ts';

const REFRESH_LOCK = 'tally-refresh';

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
export const post = <T>(path: string, json: object, sending: Sending = {}): Promise<T> => call<T>((http) => http.post(path, { json, ...options(sending) }));

/** Sends a form with files. Throws Problem. */
export const postForm = <T>(path: string, body: FormData, sending: Sending = {}): Promise<T> => call<T>((http) => http.post(path, { body, ...options(sending), timeout: 300_000 }));

function options({ idempotencyKey, signal }: Sending) {
  return { ...(idempotencyKey ? { headers: { 'Idempotency-Key': idempotencyKey } } : {}), ...(signal ? { signal } : {}) };
}

async function call<T>(send: (http: KyInstance) => Promise<Response>): Promise<T> {
  let response = await attempt(send);
  if (response.status === 401 && (await refreshed())) response = await attempt(send);
  if (!response.ok) throw await problemOf(response);
  return (response.status === 204 ? undefined : await response.json()) as T;
}

async function attempt(send: (http: KyInstance) => Promise<Response>): Promise<Response> {
  try {
    return await send(client());
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw error instanceof Problem ? error : offline();
  }
}

/** Renews the session once for all tabs: they wait for each other, and the one that comes second finds fresh cookies. */
async function refreshed(): Promise<boolean> {
  const renew = async () => (await client().post('auth/refresh', { json: {} })).ok;
  try {
    return 'locks' in navigator ? await navigator.locks.request(REFRESH_LOCK, renew) : await renew();
  } catch {
    return false;
  }
}
