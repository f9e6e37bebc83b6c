import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { randomBytes } from 'node:crypto';
import type { Account, RecoveryCodes, SecondStepKey } from '@tallypole/shared/schemas/auth-account';
import type { Me } from '@tallypole/shared/schemas/auth';
import { Authenticator, enrol } from './support/authenticator.ts';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const code = (body: unknown) => (body as { code?: string }).code;
const absent = `update session set present_at = now() - interval '1 hour' where person_id = (select id from person where email = $1)`;
/** As if the last code had been used long ago, so that a test need not wait for the next step. */
const rested = 'update totp set last_step = -1, wrong_tries = 0, wrong_since = null where person_id = (select id from person where email = $1)';

describe('a second step at sign-in', () => {
  let house: House;
  let url: string;
  let count = 0;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());

  const newcomer = async () => {
    count += 1;
    const visitor = new Visitor(house, url, `step${count}@example.com`);
    await visitor.signIn();
    return visitor;
  };
  /** The mailed code was right; what the server answers. */
  const firstStep = async (email: string) => {
    await house.sql('delete from rate_limit');
    const visitor = new Visitor(house, url, email);
    const before = house.mail.to(email).length;
    await visitor.post('/auth/codes', { email }, null);
    const answer = await visitor.post('/auth/sessions', { email, code: await visitor.latestCode(before) }, null);
    return { visitor, answer };
  };
  const second = (visitor: Visitor, entered: string) => visitor.post('/auth/sessions/second-step', { code: entered }, null);

  it('is asked for once it is on: the mailed code alone opens nothing', async () => {
    const ann = await newcomer();
    const { authenticator } = await enrol(ann);
    const { visitor, answer } = await firstStep(ann.email);
    expect([answer.status, answer.body]).toEqual([202, { next: 'second_step' }]);
    expect((await visitor.get('/me')).status).toBe(401);
    expect((await visitor.post('/auth/refresh', {}, null)).status).toBe(401);
    const [waiting] = /tally-waiting=([^;]+)/.exec(visitor.cookie())?.slice(1) ?? [];
    visitor.setCookie('tally-refresh', waiting ?? '');
    expect((await visitor.post('/auth/refresh', {}, null)).status).toBe(401);
    const done = await second(visitor, authenticator.code());
    expect(done.status).toBe(201);
    expect((done.body as Me).secondStep).toBe('on');
    expect((await visitor.get('/me')).status).toBe(200);
    expect(visitor.cookie()).not.toContain('tally-waiting');
  });

  it('takes a code once, never an older one, and a clock that is half a minute off', async () => {
    const ann = await newcomer();
    const { authenticator } = await enrol(ann);
    const used = authenticator.code();
    expect((await second((await firstStep(ann.email)).visitor, used)).status).toBe(201);
    const { visitor } = await firstStep(ann.email);
    for (const late of [used, authenticator.code(-1)]) expect(code((await second(visitor, late)).body)).toBe('wrong_code');
    await house.sql(rested, [ann.email]);
    for (const far of [-3, 3]) expect(code((await second(visitor, authenticator.code(far))).body)).toBe('wrong_code');
    expect((await second(visitor, authenticator.code(1))).status).toBe(201);
  });

  it('takes one of two that are sent at once', async () => {
    const ann = await newcomer();
    const { authenticator } = await enrol(ann);
    const [one, other] = [(await firstStep(ann.email)).visitor, (await firstStep(ann.email)).visitor];
    const shown = authenticator.code();
    const answers = await Promise.all([second(one, shown), second(other, shown)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 400]);
  });

  it('has five tries, tells the person that somebody was stopped, and is over after ten minutes', async () => {
    const ann = await newcomer();
    const { authenticator } = await enrol(ann);
    const { visitor } = await firstStep(ann.email);
    for (let i = 0; i < 5; i += 1) expect(code((await second(visitor, authenticator.wrong())).body)).toBe('wrong_code');
    expect(code((await second(visitor, authenticator.code())).body)).toBe('sign_in_over');
    expect((await house.mail.wait(ann.email, /Somebody was stopped at your second step/)).text).toContain('They did not get in.');
    const { visitor: later } = await firstStep(ann.email);
    await house.sql(`update sign_in_step set expires_at = now() - interval '1 second'`);
    expect(code((await second(later, authenticator.code())).body)).toBe('sign_in_over');
    expect(code((await second(new Visitor(house, url, ann.email), authenticator.code())).body)).toBe('sign_in_over');
  });

  it('has ten wrong codes an hour over all sign-ins; a recovery code still lets its owner in', async () => {
    const ann = await newcomer();
    const { authenticator, recoveryCodes } = await enrol(ann);
    for (let i = 0; i < 2; i += 1) {
      const { visitor } = await firstStep(ann.email);
      for (let j = 0; j < 5; j += 1) await second(visitor, authenticator.wrong());
    }
    const { visitor } = await firstStep(ann.email);
    const stopped = await second(visitor, authenticator.code());
    expect([stopped.status, stopped.headers['retry-after']]).toEqual([429, '3600']);
    expect((await second(visitor, recoveryCodes[0] ?? '')).status).toBe(201);
  });

  it('gives ten recovery codes once, each good once, read as people type them', async () => {
    const ann = await newcomer();
    const { recoveryCodes } = await enrol(ann);
    expect(recoveryCodes).toHaveLength(10);
    expect(new Set(recoveryCodes).size).toBe(10);
    expect(JSON.stringify((await ann.get('/me/account')).body)).not.toContain(recoveryCodes[0]?.slice(0, 5));
    const stored = await house.sql<{ row: string }>(`select row_to_json(r)::text as row from recovery_code r`);
    expect(stored.filter(({ row }) => recoveryCodes.some((one) => row.includes(one.replace('-', ''))))).toEqual([]);
    const typed = (recoveryCodes[3] ?? '').toLowerCase().replace('-', ' ').replaceAll('0', 'o').replaceAll('1', 'l');
    expect((await second((await firstStep(ann.email)).visitor, typed)).status).toBe(201);
    expect((await house.mail.wait(ann.email, /A recovery code was used/)).text).toContain('9 are left.');
    const { visitor } = await firstStep(ann.email);
    expect(code((await second(visitor, recoveryCodes[3] ?? '')).body)).toBe('wrong_code');
    expect(code((await second(visitor, 'AAAAA-AAAAA')).body)).toBe('wrong_code');
    expect(code((await second(visitor, 'no code')).body)).toBe('invalid_input');
    expect((await second(visitor, recoveryCodes[4] ?? '')).status).toBe(201);
    const fresh = await visitor.post('/me/second-step/recovery-codes', {}, null);
    expect((fresh.body as RecoveryCodes).account.secondStep.recoveryCodesLeft).toBe(10);
    expect(code((await second((await firstStep(ann.email)).visitor, recoveryCodes[5] ?? '')).body)).toBe('wrong_code');
  });

  it('is turned on by a right code of the key that was shown, with presence, and ends all other sessions', async () => {
    const ann = await newcomer();
    const other = await (async () => {
      const visitor = new Visitor(house, url, ann.email);
      await visitor.signIn();
      return visitor;
    })();
    await house.sql(absent, [ann.email]);
    expect(code((await ann.post('/me/second-step', {}, null)).body)).toBe('presence_needed');
    await house.sql(`update session set present_at = now()`);
    const dropped = new Authenticator(((await ann.post('/me/second-step', {}, null)).body as SecondStepKey).key);
    const shown = (await ann.post('/me/second-step', {}, null)).body as SecondStepKey;
    expect(shown.uri).toContain(`secret=${shown.key}`);
    expect(code((await ann.post('/me/second-step/confirm', { code: dropped.code() }, null)).body)).toBe('wrong_code');
    expect(((await ann.get('/me')).body as Me).secondStep).toBe('optional');
    const confirmed = await ann.post('/me/second-step/confirm', { code: new Authenticator(shown.key).code() }, null);
    expect((confirmed.body as RecoveryCodes).account).toMatchObject({ secondStep: { use: 'on', recoveryCodesLeft: 10 }, sessions: [{ current: true }] });
    expect((await other.get('/me')).status).toBe(401);
    expect((await house.mail.wait(ann.email, /Your second step is on/)).html).toContain('All other sessions were ended.');
    expect(code((await ann.post('/me/second-step', {}, null)).body)).toBe('wrong_state');
  });

  it('proves presence too, in place of a mailed code, and is needed to turn it off', async () => {
    const ann = await newcomer();
    const { authenticator } = await enrol(ann);
    await house.sql(absent, [ann.email]);
    const before = house.mail.to(ann.email).length;
    expect((await ann.post('/auth/presence/codes', {}, null)).body).toEqual({ by: 'authenticator' });
    expect(code((await ann.post('/me/second-step/remove', {}, null)).body)).toBe('presence_needed');
    // a code from the mail is no way around it
    await ann.post('/auth/codes', { email: ann.email }, null);
    expect(code((await ann.post('/auth/presence', { code: await ann.latestCode(before) }, null)).body)).toBe('wrong_code');
    expect((await ann.post('/auth/presence', { code: authenticator.code() }, null)).status).toBe(204);
    expect(((await ann.post('/me/second-step/remove', {}, null)).body as Account).secondStep).toMatchObject({ use: 'optional', since: null, recoveryCodesLeft: 0 });
    await house.mail.wait(ann.email, /Your second step was turned off/);
    expect((await firstStep(ann.email)).answer.status).toBe(201);
  });

  it('keeps its key encrypted, by a ring of keys that can be turned', async () => {
    const ann = await newcomer();
    const started = (await ann.post('/me/second-step', {}, null)).body as SecondStepKey;
    const authenticator = new Authenticator(started.key);
    await ann.post('/me/second-step/confirm', { code: authenticator.code(-1) }, null);
    const read = () => house.sql<{ key_id: string; secret: Buffer }>('select key_id, secret from totp t join person p on p.id = t.person_id where p.email = $1', [ann.email]);
    const [stored] = await read();
    expect([stored?.key_id, stored?.secret.length]).toEqual(['k1', 12 + 16 + 20]);
    expect(authenticator.secret).toHaveLength(20);
    expect(stored?.secret.includes(authenticator.secret)).toBe(false);
    const ring = `k2:${randomBytes(32).toString('base64url')}`;
    const turned = await house.web({ env: { SECOND_FACTOR_KEYS: `${ring},${house.env['SECOND_FACTOR_KEYS'] ?? ''}` } });
    const { visitor } = await firstStep(ann.email);
    expect((await second(visitor.at(turned.url), authenticator.code())).status).toBe(201);
    expect((await read())[0]?.key_id).toBe('k2');
    const without = await house.web({ env: { SECOND_FACTOR_KEYS: ring } });
    await house.sql(rested, [ann.email]);
    expect((await second((await firstStep(ann.email)).visitor.at(without.url), authenticator.code())).status).toBe(201);
  });

  it('is advised to whoever handles money, and asked for before such acts where the deployment insists', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const [lender, homeowner] = [await join(principal, job.id, 'lender'), await join(principal, job.id, 'homeowner')];
    const use = async (who: Visitor) => ((await who.get('/me')).body as Me).secondStep;
    expect([await use(principal), await use(lender), await use(homeowner)]).toEqual(['advised', 'advised', 'optional']);
    const strict = await house.web({ env: { REQUIRE_SECOND_FACTOR: 'true' } });
    const [careful, banker, owner] = [principal, lender, homeowner].map((who) => who.at(strict.url)) as [Visitor, Visitor, Visitor];
    expect([await use(careful), await use(banker), await use(owner)]).toEqual(['required', 'required', 'optional']);
    const acts: [Visitor, string][] = [[careful, `/firms/${firmId}/payouts`], [careful, `/jobs/${job.id}/payments`], [careful, `/firms/${firmId}/invitations`], [banker, `/jobs/${job.id}/draws/${firmId}/review/fundings`]];
    for (const [who, path] of acts) expect([path, code((await who.post(path)).body)]).toEqual([path, 'second_step_needed']);
    // all else goes on
    expect((await careful.get(`/firms/${firmId}/payouts`)).status).toBe(200);
    expect((await careful.post('/jobs', {})).status).toBe(400);
    await enrol(careful);
    for (const [who, path] of acts.slice(0, 3)) expect([path, code((await who.post(path)).body)]).not.toEqual([path, 'second_step_needed']);
  });

  it('leaves nothing behind of somebody who is deactivated', async () => {
    const ann = await newcomer();
    await enrol(ann);
    await ann.post('/me/password', { password: 'our lumber yard opens at six' }, null);
    const left = () => house.sql(`select 1 from person p where p.email = $1 and (exists (select 1 from totp t where t.person_id = p.id) or exists (select 1 from password w where w.person_id = p.id))`, [ann.email]);
    expect(await left()).toHaveLength(1);
    await house.sql('update person set deactivated_at = now() where email = $1', [ann.email]);
    expect(await left()).toEqual([]);
    expect(code((await firstStep(ann.email)).answer.body)).toBe('code_expired');
  });
});
