import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import jwt from 'jsonwebtoken';
import request from 'supertest';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const code = (body: unknown) => (body as { code?: string }).code;

describe('signing in', () => {
  let house: House;
  let url: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());

  const ask = async (email: string) => {
    const visitor = new Visitor(house, url, email);
    const answer = await visitor.post('/auth/codes', { email }, null);
    expect(answer.status).toBe(202);
    return { visitor, right: await visitor.latestCode() };
  };
  const enter = (visitor: Visitor, entered: string) => visitor.post('/auth/sessions', { email: visitor.email, code: entered }, null);
  const other = (right: string) => String((Number(right) + 1) % 1_000_000).padStart(6, '0');

  it('takes a code once, written with the address in any case', async () => {
    const { visitor, right } = await ask('once@example.com');
    expect((await visitor.post('/auth/sessions', { email: ' Once@Example.COM ', code: right }, null)).status).toBe(201);
    expect(code((await enter(visitor, right)).body)).toBe('code_expired');
  });

  it('counts wrong codes: after five the right one is no longer good', async () => {
    const { visitor, right } = await ask('five@example.com');
    for (let i = 0; i < 5; i += 1) expect(code((await enter(visitor, other(right))).body)).toBe('wrong_code');
    expect(code((await enter(visitor, right)).body)).toBe('code_expired');
  });

  it('lets only the newest code in', async () => {
    const { visitor, right } = await ask('newest@example.com');
    await visitor.post('/auth/codes', { email: visitor.email }, null);
    const second = await visitor.latestCode(1);
    if (second !== right) expect(code((await enter(visitor, right)).body)).toBe('wrong_code');
    expect((await enter(visitor, second)).status).toBe(201);
  });

  it('refuses a code after ten minutes', async () => {
    const { visitor, right } = await ask('late@example.com');
    await house.sql(`update sign_in_code set expires_at = now() - interval '1 second' where email = $1`, [visitor.email]);
    expect(code((await enter(visitor, right)).body)).toBe('code_expired');
  });

  it('keeps no code in the queue and only its HMAC in the database', async () => {
    const { visitor, right } = await ask('hidden@example.com');
    const [stored] = await house.sql<{ code_hash: Buffer }>('select code_hash from sign_in_code where email = $1', [visitor.email]);
    expect(stored?.code_hash).toHaveLength(32);
    const [found] = await house.sql<{ n: number }>(`select count(*)::int as n from graphile_worker._private_jobs where payload::text like '%' || $1 || '%'`, [right]).catch(() => [{ n: 0 }]);
    expect(found?.n).toBe(0);
  });

  it('answers the same for an address that nobody has', async () => {
    await ask('known@example.com');
    const [known, unknown] = await Promise.all(['known@example.com', 'unknown@example.com'].map((email) => new Visitor(house, url, email).post('/auth/codes', { email }, null)));
    expect(Object.keys(known?.body as object)).toEqual(Object.keys(unknown?.body as object));
    expect(known?.status).toBe(unknown?.status);
  });

  it('limits the codes of one address', async () => {
    const visitor = new Visitor(house, url, 'eager@example.com');
    const answers = [];
    for (let i = 0; i < 7; i += 1) answers.push((await visitor.post('/auth/codes', { email: visitor.email }, null)).status);
    expect(answers).toEqual([202, 202, 202, 202, 202, 202, 429]);
  });

  it('rotates the refresh token, forgives two tabs, and ends the session when an old one is used later', async () => {
    const visitor = new Visitor(house, url, 'tabs@example.com');
    await visitor.signIn();
    const first = /tally-refresh=([^;]+)/.exec(visitor.cookie())?.[1] ?? '';
    expect((await visitor.post('/auth/refresh', {}, null)).status).toBe(204);
    const second = /tally-refresh=([^;]+)/.exec(visitor.cookie())?.[1] ?? '';
    expect(second).not.toBe(first);
    const tab = visitor.at(url);
    tab.setCookie('tally-refresh', first);
    expect((await tab.post('/auth/refresh', {}, null)).status).toBe(204);
    await house.sql(`update session set rotated_at = rotated_at - interval '61 seconds'`);
    expect((await tab.post('/auth/refresh', {}, null)).status).toBe(401);
    expect((await visitor.get('/me')).status).toBe(401);
  });

  it('ends at once with sign-out, whatever the token still says', async () => {
    const visitor = new Visitor(house, url, 'out@example.com');
    await visitor.signIn();
    const kept = visitor.at(url);
    expect((await visitor.post('/auth/sign-out', {}, null)).status).toBe(204);
    expect((await kept.get('/me')).status).toBe(401);
  });

  it('refuses a forged or unsigned token', async () => {
    const visitor = new Visitor(house, url, 'forged@example.com');
    await visitor.signIn();
    const real = /tally=([^;]+)/.exec(visitor.cookie())?.[1] ?? '';
    const payload = jwt.decode(real) as object;
    const unsigned = `${Buffer.from('{"alg":"none","typ":"JWT"}').toString('base64url')}.${Buffer.from(JSON.stringify(payload)).toString('base64url')}.`;
    for (const token of [jwt.sign(payload, 'x'.repeat(40)), unsigned, 'nonsense']) {
      expect((await request(url).get('/api/me').set('Cookie', `tally=${token}`)).status).toBe(401);
    }
  });

  it('refuses a write from another site, a plain form and a missing origin', async () => {
    const visitor = new Visitor(house, url, 'cross@example.com');
    await visitor.signIn();
    const send = (headers: Record<string, string>) => request(url).post('/api/me/name').set('Cookie', visitor.cookie()).set(headers).send('{"name":"Mallory"}');
    expect(code((await send({ Origin: 'https://elsewhere.example', 'Content-Type': 'application/json' })).body)).toBe('cross_site');
    expect(code((await send({ 'Content-Type': 'application/json' })).body)).toBe('cross_site');
    expect(code((await send({ Origin: url, 'Content-Type': 'text/plain' })).body)).toBe('cross_site');
    expect((await send({ Origin: url, 'Content-Type': 'application/json' })).status).toBe(200);
  });

  it('refuses what cannot be stored, unknown fields and bodies that are not JSON', async () => {
    const visitor = new Visitor(house, url, 'input@example.com');
    await visitor.signIn();
    for (const body of [{ name: 'A\u0000B' }, { name: 'A\ud800B' }, { name: 'x'.repeat(121) }, { name: 'Ann', admin: true }, { name: 7 }]) {
      expect([body, (await visitor.post('/me/name', body, null)).status]).toEqual([body, 400]);
    }
    const broken = await request(url).post('/api/me/name').set('Cookie', visitor.cookie()).set('Origin', url).set('Content-Type', 'application/json').send('{"name":');
    expect([broken.status, code(broken.body)]).toEqual([400, 'malformed_request']);
    expect(broken.headers['content-type']).toContain('application/problem+json');
  });

  it('proves presence by a fresh code', async () => {
    const visitor = new Visitor(house, url, 'present@example.com');
    await visitor.signIn();
    await house.sql(`update session set present_at = now() - interval '1 hour'`);
    const before = house.mail.to(visitor.email).length;
    expect((await visitor.post('/auth/presence/codes', {}, null)).status).toBe(202);
    const fresh = await visitor.latestCode(before);
    expect(code((await visitor.post('/auth/presence', { code: other(fresh) }, null)).body)).toBe('wrong_code');
    expect((await visitor.post('/auth/presence', { code: fresh }, null)).status).toBe(204);
    const [row] = await house.sql<{ fresh: boolean }>(`select max(present_at) > now() - interval '1 minute' as fresh from session s join person p on p.id = s.person_id where p.email = $1`, [visitor.email]);
    expect(row?.fresh).toBe(true);
  });
});
