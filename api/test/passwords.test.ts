import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import type { Account } from '@tallypole/shared/schemas/auth-account';
import { enrol } from './support/authenticator.ts';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const code = (body: unknown) => (body as { code?: string }).code;
const said = (body: unknown) => (body as { errors?: { pointer: string; message: string }[] }).errors?.[0];
const GOOD = 'our lumber yard opens at six';

describe('passwords', () => {
  let house: House;
  let url: string;
  let log: string;
  let count = 0;

  beforeAll(async () => {
    house = await House.open({ LOG_LEVEL: 'debug' });
    log = path.join(house.folder, 'web.log');
    await house.worker();
    ({ url } = await house.web({ logTo: log }));
  });
  afterAll(() => house.close());

  const newcomer = async (password?: string) => {
    count += 1;
    const visitor = new Visitor(house, url, `word${count}@example.com`);
    await visitor.signIn();
    if (password) expect((await visitor.post('/me/password', { password }, null)).status).toBe(200);
    await house.sql('delete from rate_limit');
    return visitor;
  };
  const enter = (email: string, password: string) => new Visitor(house, url, email).post('/auth/sessions/by-password', { email, password }, null);

  it('let in beside the mailed code, written exactly so, with any characters', async () => {
    for (const password of [GOOD, '木材を測る古い棒と新しい家の梁', ' spaces at both ends stay ', '"><script>alert(1)</script>', `${'long as a beam '.repeat(16)}!`]) {
      const ann = await newcomer(password);
      expect([password, (await enter(ann.email, password)).status]).toEqual([password, 201]);
      expect([password, code((await enter(ann.email, `${password} `)).body)]).toEqual([password, 'wrong_password']);
      expect([password, code((await enter(ann.email, password.replace(/.$/u, 'X'))).body)]).toEqual([password, 'wrong_password']);
    }
    expect(code((await enter((await newcomer(GOOD)).email, GOOD.toUpperCase())).body)).toBe('wrong_password');
  });

  it('are refused at their field where they are short, over-long, common, a run, or the person', async () => {
    const ann = await newcomer();
    await ann.post('/me/name', { name: 'Marit Halvorsen' }, null);
    const refused: [string, string][] = [['eleven char', 'at least 12'], ['🪵🏠🔨📐🧱🪜🚪🪟🔩🪛📏', 'at least 12'], ['ab1 '.repeat(65), 'at most 256'], ['Password1234!', 'first passwords'], ['abcdefghijklm', 'runs along'], ['Halvorsen2026', 'your name or address']];
    for (const [password, why] of refused) expect([password, said((await ann.post('/me/password', { password }, null)).body)]).toEqual([password, { pointer: '/password', code: expect.any(String) as unknown, message: expect.stringContaining(why) as unknown }]);
    expect(((await ann.get('/me/account')).body as Account).password).toBeNull();
  });

  it('answer and take the same for an unknown address, one without a password and a wrong password', async () => {
    const [withOne, without] = [await newcomer(GOOD), await newcomer()];
    const times: Record<string, number[]> = {};
    const bodies = new Set<string>();
    // by turns, so that what else the machine does meets all three
    for (let turn = 0; turn < 7; turn += 1) {
      for (const email of [withOne.email, without.email, 'nobody.ever@example.com']) {
        await house.sql('delete from rate_limit');
        const began = performance.now();
        const { body, status } = await enter(email, 'not the password at all');
        (times[email] ??= []).push(performance.now() - began);
        const { requestId: _, ...rest } = body as Record<string, unknown>;
        bodies.add(JSON.stringify([status, rest]));
      }
    }
    expect(bodies.size).toBe(1);
    // the fastest of several: without a hash to compare it is a fraction of that
    const [known, ...others] = Object.values(times).map((taken) => Math.min(...taken));
    for (const other of others) expect(other / (known ?? 0)).toBeGreaterThan(0.6);
  });

  it('may be tried ten times in a quarter of an hour for an address; a mailed code still lets in, and others are not held up', async () => {
    const [ann, ben] = [await newcomer(GOOD), await newcomer(GOOD)];
    const statuses = [];
    for (let i = 0; i < 11; i += 1) statuses.push((await enter(ann.email, 'not the password at all')).status);
    expect(statuses).toEqual([...Array<number>(10).fill(400), 429]);
    expect((await enter(ann.email, GOOD)).status).toBe(429);
    expect((await enter(ben.email, GOOD)).status).toBe(201);
    await new Visitor(house, url, ann.email).signIn();
    // the same for an address that nobody has
    for (let i = 0; i < 10; i += 1) await enter('nobody.tries@example.com', GOOD);
    expect((await enter('nobody.tries@example.com', GOOD)).status).toBe(429);
  });

  it('are set, changed and removed with presence only; each is mailed and ends all other sessions', async () => {
    const ann = await newcomer();
    const steps: [string, object, RegExp][] = [['/me/password', { password: GOOD }, /password was set/], ['/me/password', { password: `${GOOD} again` }, /password was changed/], ['/me/password/remove', {}, /password was removed/]];
    for (const [route, body, subject] of steps) {
      const other = new Visitor(house, url, ann.email);
      await other.signIn();
      await house.sql(`update session set present_at = now() - interval '1 hour'`);
      expect([route, code((await ann.post(route, body, null)).body)]).toEqual([route, 'presence_needed']);
      await house.sql('update session set present_at = now()');
      const answer = await ann.post(route, body, null);
      expect([answer.status, (answer.body as Account).sessions.map(({ current }) => current)]).toEqual([200, [true]]);
      expect((await other.get('/me')).status).toBe(401);
      expect((await house.mail.wait(ann.email, subject)).text).toContain('sign in by a mailed code');
      await house.sql('delete from rate_limit');
    }
    expect(code((await enter(ann.email, `${GOOD} again`)).body)).toBe('wrong_password');
    // a second time nothing is left to remove, and nobody is mailed
    const mails = house.mail.to(ann.email).length;
    expect((await ann.post('/me/password/remove', {}, null)).status).toBe(200);
    expect(house.mail.to(ann.email)).toHaveLength(mails);
  });

  it('do not go round a second step', async () => {
    const ann = await newcomer(GOOD);
    const { authenticator } = await enrol(ann);
    const visitor = new Visitor(house, url, ann.email);
    expect((await visitor.post('/auth/sessions/by-password', { email: ann.email, password: GOOD }, null)).status).toBe(202);
    expect((await visitor.get('/me')).status).toBe(401);
    expect((await visitor.post('/auth/sessions/second-step', { code: authenticator.code() }, null)).status).toBe(201);
  });

  it('are kept as Argon2id hashes with 19 MiB and two passes, which no other person and no reader gets', async () => {
    const [ann, ben] = [await newcomer(GOOD), await newcomer(GOOD)];
    const kept = await house.sql<{ hash: string }>('select w.hash from password w join person p on p.id = w.person_id where p.email = any($1)', [[ann.email, ben.email]]);
    expect(kept.map(({ hash }) => hash.split('$').slice(1, 4))).toEqual([['argon2id', 'v=19', 'm=19456,t=2,p=1'], ['argon2id', 'v=19', 'm=19456,t=2,p=1']]);
    expect(kept[0]?.hash).not.toBe(kept[1]?.hash);
    for (const role of ['app_read', 'app_write', 'app_worker'] as const) {
      await expect(house.as(role, async (client) => (await client.query('select hash from password')).rows as object[])).rejects.toMatchObject({ code: '42501' });
    }
    expect(readFileSync(log, 'utf8')).not.toContain('lumber');
  });
});
