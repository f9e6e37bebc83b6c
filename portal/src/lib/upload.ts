import { answered } from './http.ts';
import { offline, Problem, problemOf } from './problem.ts';

export interface Uploading {
  /** How many of the file's bytes have left, of how many. */
  onProgress?: (sent: number, total: number) => void;
}

/** Sends a form with a file and tells how far it is; a session that ended is renewed once. Throws Problem. */
export async function upload<T>(path: string, form: FormData, uploading: Uploading = {}): Promise<T> {
  const response = await answered(() => send(path, form, uploading));
  if (!response.ok) throw await problemOf(response);
  return (await response.json()) as T;
}

// fetch can't tell how much has left
function send(path: string, form: FormData, { onProgress }: Uploading): Promise<Response> {
  return new Promise((done, fail) => {
    const request = new XMLHttpRequest();
    request.open('POST', `/api/${path}`);
    request.upload.onprogress = ({ loaded, total }) => onProgress?.(loaded, total);
    request.onload = () => done(new Response(request.responseText, { status: request.status, headers: { 'Content-Type': request.getResponseHeader('Content-Type') ?? '' } }));
    request.onerror = () => fail(offline());
    request.ontimeout = () => fail(offline());
    request.timeout = 300_000;
    request.send(form);
  });
}

/** Whether trying the same again may help: no answer, a busy server, a failure on its side. */
export const mayHelpToRetry = (problem: Problem): boolean => problem.status === 0 || problem.status === 401 || problem.status === 429 || problem.status >= 500;
