import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { json, refusal, serve, type Answer } from '../testing/server.ts';
import { noteBuild } from './build.ts';
import { get, post } from './http.ts';
import { Problem } from './problem.ts';
import { onSessionEnd } from './session.ts';

let close: () => Promise<void> = () => Promise.resolve();
const start = async (answer: Answer) => {
  const server = await serve(answer);
  close = server.close;
  return server.received;
};
const refused = async (work: Promise<unknown>): Promise<Problem> => {
  const error: unknown = await work.then(() => null, (reason: unknown) => reason);
  if (!(error instanceof Problem)) throw new Error(`expected a Problem, got ${String(error)}`);
  return error;
};

beforeEach(() => {
  localStorage.clear();
  // the lock that tabs share, which this environment lacks: one after the other
  let queue: Promise<unknown> = Promise.resolve();
  vi.stubGlobal('navigator', { locks: { request: (_name: string, work: () => Promise<unknown>) => (queue = queue.catch(() => undefined).then(work)) } });
});
afterEach(async () => {
  vi.unstubAllGlobals();
  noteBuild('a', 'a');
  await close();
});

describe('the HTTP client', () => {
  it('renews a session that ran out and sends the same request once more, with the same key', async () => {
    let fresh = false;
    const received = await start(({ path }, response) => {
      if (path === '/api/auth/refresh') {
        fresh = true;
        json(response, 204, null);
      } else if (fresh) json(response, 200, { done: true });
      else json(response, 401, refusal('not_signed_in', 401));
    });
    expect(await post('draws/1/approve', { effect: 'x' }, { idempotencyKey: 'k-1' })).toEqual({ done: true });
    expect(received.map(({ path }) => path)).toEqual(['/api/draws/1/approve', '/api/auth/refresh', '/api/draws/1/approve']);
    expect(received.filter(({ key }) => key === 'k-1').map(({ body }) => body)).toEqual(['{"effect":"x"}', '{"effect":"x"}']);
  });

  it('renews once for several requests that were refused together', async () => {
    let fresh = false;
    const received = await start(({ path }, response) => {
      if (path === '/api/auth/refresh') {
        setTimeout(() => {
          fresh = true;
          json(response, 204, null);
        }, 20);
      } else if (fresh) json(response, 200, { path });
      else json(response, 401, refusal('not_signed_in', 401));
    });
    const answers = await Promise.all(['a', 'b', 'c'].map((path) => get(path)));
    expect(answers).toEqual([{ path: '/api/a' }, { path: '/api/b' }, { path: '/api/c' }]);
    expect(received.filter(({ path }) => path === '/api/auth/refresh')).toHaveLength(1);
  });

  it('says that the session has ended when it cannot be renewed, and does not try for ever', async () => {
    const ended = vi.fn();
    const stop = onSessionEnd(ended);
    const received = await start((_got, response) => json(response, 401, refusal('not_signed_in', 401)));
    expect((await refused(get('me'))).code).toBe('not_signed_in');
    stop();
    expect(ended).toHaveBeenCalledTimes(1);
    expect(received).toHaveLength(2);
  });

  it('does not take a busy server for an ended session', async () => {
    const ended = vi.fn();
    const stop = onSessionEnd(ended);
    await start(({ path }, response) => (path === '/api/auth/refresh' ? json(response, 503, refusal('busy', 503)) : json(response, 401, refusal('not_signed_in', 401))));
    expect((await refused(get('me'))).code).toBe('busy');
    stop();
    expect(ended).not.toHaveBeenCalled();
  });

  it('turns a refusal into a Problem with its fields, sentence and reference', async () => {
    await start((_got, response) =>
      json(response, 422, refusal('rule_broken', 422, { detail: 'The draw is larger than what is left.', requestId: 'r-7', errors: [{ pointer: '/lines/0/amountCents', code: 'max', message: 'Too much.' }] })),
    );
    const problem = await refused(post('draws', {}));
    expect(problem).toMatchObject({ code: 'rule_broken', status: 422, message: 'The draw is larger than what is left.', requestId: 'r-7' });
    expect(problem.errors).toEqual([{ pointer: '/lines/0/amountCents', code: 'max', message: 'Too much.' }]);
  });

  it('says something sensible where the answer is not ours, and where none comes', async () => {
    await start((_got, response) => {
      response.writeHead(502, { 'Content-Type': 'text/html' });
      response.end('<h1>Bad gateway</h1>');
    });
    expect(await refused(get('jobs'))).toMatchObject({ code: 'failed', status: 502, message: expect.stringContaining('Nothing was changed') });
    await close();
    close = () => Promise.resolve();
    expect(await refused(get('jobs'))).toMatchObject({ code: 'offline', status: 0 });
  });

  it('sends no act from a page that is older than the server, but signs out and reads', async () => {
    const received = await start((_got, response) => json(response, 200, {}, { 'Build-Id': 'new' }));
    noteBuild('new', 'old');
    expect((await refused(post('draws', {}))).code).toBe('outdated');
    expect(received).toEqual([]);
    await post('auth/sign-out', {});
    await get('jobs');
    expect(received.map(({ path }) => path)).toEqual(['/api/auth/sign-out', '/api/jobs']);
  });
});
