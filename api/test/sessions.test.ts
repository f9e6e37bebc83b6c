import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Account } from '@tallypole/shared/schemas/auth-account';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const refreshOf = (visitor: Visitor) => /tally-refresh=([^;]+)/.exec(visitor.cookie())?.[1] ?? '';

describe('sessions', () => {
  let house: House;
  let url: string;
  let second: string;
  let count = 0;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    [{ url }, { url: second }] = await Promise.all([house.web(), house.web()]);
  });
  afterAll(() => house.close());

  const signedIn = async (email = `sess${(count += 1)}@example.com`) => {
    const visitor = new Visitor(house, url, email);
    await visitor.signIn();
    await house.sql('delete from rate_limit');
    return visitor;
  };
  const refresh = (visitor: Visitor) => visitor.post('/auth/refresh', {}, null);
  const later = (visitor: Visitor, interval: string) =>
    house.sql(`update session set rotated_at = rotated_at - $2::interval, present_at = present_at - $2::interval, created_at = created_at - $2::interval, expires_at = expires_at - $2::interval
      where person_id = (select id from person where email = $1)`, [visitor.email, interval]);
  const account = async (visitor: Visitor) => (await visitor.get('/me/account')).body as Account;

  it('are renewed by many tabs at once on two servers: one new token, all go on', async () => {
    const ann = await signedIn();
    const tabs = Array.from({ length: 8 }, (_, i) => ann.at(i % 2 === 0 ? url : second));
    const answers = await Promise.all(tabs.map(refresh));
    expect(answers.map(({ status }) => status)).toEqual(Array<number>(8).fill(204));
    const tokens = new Set(tabs.map(refreshOf));
    tokens.delete(refreshOf(ann));
    expect(tokens.size).toBe(1);
    for (const tab of tabs) expect((await tab.get('/me')).status).toBe(200);
    const newest = tabs.find((tab) => refreshOf(tab) !== refreshOf(ann));
    expect((await refresh(newest ?? ann)).status).toBe(204);
    expect(house.mail.to(ann.email).filter(({ subject }) => /sessions was ended/.test(subject ?? ''))).toEqual([]);
  });

  it('end as a family when a token comes back that was used up, however many renewals ago, and the person is told', async () => {
    for (const renewals of [1, 3]) {
      const ann = await signedIn();
      const thief = ann.at(second);
      for (let i = 0; i < renewals; i += 1) expect((await refresh(ann)).status).toBe(204);
      await later(ann, '61 seconds');
      expect((await refresh(thief)).status).toBe(401);
      expect((await ann.get('/me')).status).toBe(401);
      expect((await refresh(ann)).status).toBe(401);
      const mail = await house.mail.wait(ann.email, /One of your sessions was ended/);
      expect(mail.text).toContain('a key that was used up came back');
    }
  });

  it('do not end by a token that was never issued, whoever makes one up', async () => {
    const ann = await signedIn();
    const [random, session, seal] = refreshOf(ann).split('.') as [string, string, string];
    for (const forged of [`${'A'.repeat(43)}.${session}.${seal}`, `${random}.${v7()}.${seal}`, `${random}.${session}.${'A'.repeat(43)}`, `${random}.${session}`, random, '..', `${'A'.repeat(43)}.${session}.`]) {
      const stranger = new Visitor(house, url, ann.email);
      stranger.setCookie('tally-refresh', forged);
      expect([forged, (await refresh(stranger)).status]).toEqual([forged, 401]);
    }
    expect((await refresh(ann)).status).toBe(204);
  });

  it('are over after 7 days without use', async () => {
    const [used, idle] = [await signedIn(), await signedIn()];
    await later(used, '6 days 23 hours');
    await later(idle, '7 days 1 minute');
    expect([(await refresh(used)).status, (await refresh(idle)).status]).toEqual([204, 401]);
    // an idle session is no theft
    expect(house.mail.to(idle.email).filter(({ subject }) => /sessions was ended/.test(subject ?? ''))).toEqual([]);
  });

  it('are over after 30 days, however much they are used', async () => {
    const ann = await signedIn();
    for (let days = 0; days < 25; days += 5) {
      await later(ann, '5 days');
      expect((await refresh(ann)).status).toBe(204);
    }
    await later(ann, '5 days');
    expect((await refresh(ann)).status).toBe(401);
    expect((await ann.get('/me')).status).toBe(401);
  });

  it('are listed in plain words, this one first, and ended one by one or all others at once', async () => {
    const ann = await signedIn();
    const [phone, desk] = [await signedIn(ann.email), await signedIn(ann.email)];
    await house.sql(`update session set user_agent = 'Mozilla/5.0 (Windows NT 10.0; Win64; x64; rv:140.0) Gecko/20100101 Firefox/140.0' where id = (select max(id::text)::uuid from session)`);
    const listed = (await account(ann)).sessions;
    expect(listed.map(({ device, current }) => [device, current])).toEqual([['An unknown browser', true], ['Firefox on Windows', false], ['An unknown browser', false]]);
    expect(Object.keys(listed[0] ?? {}).sort()).toEqual(['current', 'device', 'endsAt', 'id', 'lastSeenAt', 'startedAt']);
    const [, other] = listed;
    expect(((await ann.post(`/me/sessions/${other?.id}/end`, {}, null)).body as Account).sessions).toHaveLength(2);
    expect([(await desk.get('/me')).status, (await refresh(desk)).status, (await phone.get('/me')).status]).toEqual([401, 401, 200]);
    // sent twice: the same answer
    expect((await ann.post(`/me/sessions/${other?.id}/end`, {}, null)).status).toBe(200);
    const third = await signedIn(ann.email);
    expect(((await ann.post('/me/sessions/end-others', {}, null)).body as Account).sessions).toMatchObject([{ current: true }]);
    expect([(await phone.get('/me')).status, (await third.get('/me')).status, (await ann.get('/me')).status]).toEqual([401, 401, 200]);
    await later(ann, '7 days 1 minute');
    expect((await account(await signedIn(ann.email))).sessions).toHaveLength(1);
  });

  it('of others are nobody else\'s to see or end', async () => {
    const [ann, ben] = [await signedIn(), await signedIn()];
    const [session] = (await account(ann)).sessions;
    expect((await account(ben)).sessions.map(({ id }) => id)).not.toContain(session?.id);
    expect((await ben.post(`/me/sessions/${session?.id}/end`, {}, null)).status).toBe(404);
    expect((await ann.get('/me')).status).toBe(200);
  });
});
