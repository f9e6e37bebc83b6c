import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { LIMITS } from '../src/common/rate-limit.guard.ts';
import { createJob, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const PUBLIC = 'https://tally.test';

describe('an answer of the server behind its public address', () => {
  let house: House;
  let url: string;
  let log: string;

  beforeAll(async () => {
    house = await House.open({ LOG_LEVEL: 'warn' });
    await house.worker();
    const portal = path.join(house.folder, 'portal');
    mkdirSync(path.join(portal, 'assets'), { recursive: true });
    writeFileSync(path.join(portal, 'index.html'), '<!doctype html><title>Tallypole</title>');
    log = path.join(house.folder, 'web.log');
    ({ url } = await house.web({ env: { PUBLIC_URL: PUBLIC, PORTAL_DIST: portal }, logTo: log }));
  });
  afterAll(() => house.close());

  const get = (at: string, headers: Record<string, string> = {}) => fetch(`${url}${at}`, { headers, redirect: 'manual' });
  const post = (at: string, body: unknown, headers: Record<string, string> = {}) =>
    fetch(`${url}${at}`, { method: 'POST', headers: { origin: PUBLIC, 'content-type': 'application/json', ...headers }, body: JSON.stringify(body) });

  it.each(['/', '/jobs/anything', '/api/health', '/api/me', '/api/nothing-here'])('sends its policies with every answer (%s)', async (at) => {
    const { headers } = await get(at, { accept: 'text/html' });
    const policy = Object.fromEntries((headers.get('content-security-policy') ?? '').split(';').map((part) => [part.split(' ')[0], part.split(' ').slice(1).join(' ')]));
    expect(policy).toMatchObject({ 'default-src': "'self'", 'script-src': "'self'", 'object-src': "'none'", 'base-uri': "'none'", 'frame-ancestors': "'none'", 'form-action': "'self'" });
    expect(headers.get('strict-transport-security')).toBe('max-age=31536000; includeSubDomains');
    expect([headers.get('x-content-type-options'), headers.get('referrer-policy'), headers.get('x-powered-by')]).toEqual(['nosniff', 'no-referrer', null]);
    expect(headers.get('content-type')).toMatch(/; charset=utf-8$/i);
    expect(headers.get('cache-control')).toBe(at.startsWith('/api') ? 'no-store' : 'no-cache');
  });

  it('sets cookies that only this site and no script gets, new ones at each sign-in', async () => {
    const email = 'cookies@people.example';
    const signIn = async () => {
      const before = house.mail.to(email).length;
      await post('/api/auth/codes', { email });
      const code = await new Visitor(house, url, email).latestCode(before);
      return (await post('/api/auth/sessions', { email, code })).headers.getSetCookie();
    };
    const [first, second] = [await signIn(), await signIn()];
    for (const cookie of [...first, ...second]) expect(cookie).toMatch(/^__Host-tally[a-z-]*=([\w.-]{40,}; Max-Age=\d+)?; Path=\/; Expires=[^;]+; HttpOnly; Secure; SameSite=Strict$/);
    const given = (cookies: string[]) => cookies.map((cookie) => cookie.split(';')[0] ?? '').filter((pair) => !pair.endsWith('='));
    expect(given(first).map((pair) => pair.split('=')[0])).toEqual(['__Host-tally', '__Host-tally-refresh']);
    expect(given(first).filter((pair) => given(second).includes(pair))).toEqual([]);
  });

  it('lets no other origin read', async () => {
    const asked = await fetch(`${url}/api/me`, { method: 'OPTIONS', headers: { origin: 'https://elsewhere.test', 'access-control-request-method': 'GET' } });
    const got = await get('/api/health', { origin: 'https://elsewhere.test' });
    for (const { headers } of [asked, got]) expect([...headers.keys()].filter((name) => name.startsWith('access-control'))).toEqual([]);
    expect(got.headers.get('cross-origin-resource-policy')).toBe('same-origin');
  });

  it.each(['//elsewhere.test', '/\\elsewhere.test', '/api//elsewhere.test/', '/jobs?next=https://elsewhere.test', '/assets'])('redirects nowhere (%s)', async (at) => {
    const answer = await get(at, { accept: 'text/html' });
    expect(answer.headers.get('location') ?? '').not.toMatch(/elsewhere/);
  });

  it('believes a forwarded address from the proxy alone', async () => {
    const { hits = 0 } = LIMITS.sign_in ?? {};
    // the test speaks from the loopback address, as a proxy on the same machine does: what it forwards counts, and of several only the last
    const attempt = (forwarded: string) => post('/api/auth/sessions', { email: 'nobody@people.example', code: '000000' }, { 'x-forwarded-for': forwarded });
    const statuses = [];
    for (let i = 0; i <= hits; i += 1) statuses.push((await attempt(`198.51.100.${i}, 203.0.113.7`)).status);
    expect([statuses.at(-2), statuses.at(-1)]).toEqual([400, 429]);
    expect((await attempt('203.0.113.8')).status).toBe(400);
    expect(readFileSync(log, 'utf8')).toContain('"address":"203.0.113.7"');
  });

  it('takes no parameter twice and no prototype from outside', async () => {
    const { principal, firmId } = await principalWithFirm(house, (await house.web()).url);
    const job = await createJob(principal, firmId);
    const list = `/jobs/${job.id}/milestones`;
    expect((await principal.get(list)).status).toBe(200);
    for (const query of ['?limit=1&limit=2', '?__proto__[polluted]=yes', '?constructor.prototype.polluted=yes']) expect([200, 400]).toContain((await principal.get(`${list}${query}`)).status);
    // a name that comes by the prototype is no name, and no later request has one by it either
    for (const body of ['{"__proto__":{"name":"Ghost"}}', '{"constructor":{"prototype":{"name":"Ghost"}}}', '{}']) {
      const answer = await fetch(`${principal.url}/api/me/name`, { method: 'POST', headers: { origin: principal.url, cookie: principal.cookie(), 'content-type': 'application/json' }, body });
      expect([body, answer.status, ((await answer.json()) as { errors?: { pointer: string }[] }).errors?.map(({ pointer }) => pointer)]).toEqual([body, 400, ['/name']]);
    }
  });

  it('shows its documentation in development only', async () => {
    for (const at of ['/api/docs', '/api/openapi.json']) expect((await get(at)).status).toBe(404);
    const { url: open } = await house.web({ env: { NODE_ENV: 'development' } });
    expect((await fetch(`${open}/api/docs`)).status).toBe(200);
  });
});
