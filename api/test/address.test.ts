import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import type { Account } from '@tallypole/shared/schemas/auth-account';
import type { Me } from '@tallypole/shared/schemas/auth';
import { enrol } from './support/authenticator.ts';
import { House, until } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const code = (body: unknown) => (body as { code?: string }).code;

describe('changing one\'s address', () => {
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
    const visitor = new Visitor(house, url, `old${count}@example.com`);
    await visitor.signIn();
    await house.sql('delete from rate_limit');
    return { visitor, to: `new${count}@example.org` };
  };
  const ask = (visitor: Visitor, email: string) => visitor.post('/me/address/codes', { email }, null);
  const codeAt = async (address: string) => /^\d{6}/.exec((await house.mail.wait(address, /confirms your new address/)).subject ?? '')?.[0] ?? '';
  const enter = (visitor: Visitor, entered: string) => visitor.post('/me/address', { code: entered }, null);
  const moved = async () => {
    const { visitor, to } = await newcomer();
    await ask(visitor, to);
    expect((await enter(visitor, await codeAt(to))).status).toBe(200);
    const mail = await house.mail.wait(visitor.email, /Your address was changed/);
    const token = /\/address-undo#(\S+)/.exec(mail.text ?? '')?.[1] ?? '';
    return { visitor, to, token, mail };
  };
  const undo = (token: string) => new Visitor(house, url, '').post('/auth/address/undo', { token }, null);

  it('takes presence and a code at the new address; then that one signs in, and the old one is told', async () => {
    const { visitor, to } = await newcomer();
    const other = new Visitor(house, url, visitor.email);
    await other.signIn();
    await house.sql(`update session set present_at = now() - interval '1 hour'`);
    expect(code((await ask(visitor, to)).body)).toBe('presence_needed');
    await house.sql('update session set present_at = now()');
    const asked = await ask(visitor, ` ${to.toUpperCase()} `);
    expect([asked.status, (asked.body as { sentTo: string }).sentTo]).toEqual([202, to]);
    const right = await codeAt(to);
    expect(code((await enter(visitor, right === '111111' ? '222222' : '111111')).body)).toBe('wrong_code');
    expect(((await visitor.get('/me')).body as Me).person.email).toBe(visitor.email);
    const { id } = ((await visitor.get('/me')).body as Me).person;
    expect(((await enter(visitor, right)).body as Me).person).toMatchObject({ id, email: to });
    expect([(await visitor.get('/me')).status, (await other.get('/me')).status]).toEqual([200, 401]);
    const mail = await house.mail.wait(visitor.email, /Your address was changed to n…@example.org/);
    expect(mail.text).not.toContain(to);
    expect((await new Visitor(house, url, to).signIn()).person.id).toBe(id);
    expect(code((await enter(visitor, right)).body)).toBe('code_expired');
  });

  it('keeps a code that was mailed to the old address before from opening anything', async () => {
    const { visitor, to } = await newcomer();
    const before = house.mail.to(visitor.email).length;
    await visitor.post('/auth/codes', { email: visitor.email }, null);
    const pending = await visitor.latestCode(before);
    await ask(visitor, to);
    await enter(visitor, await codeAt(to));
    expect(code((await visitor.post('/auth/sessions', { email: visitor.email, code: pending }, null)).body)).toBe('code_expired');
  });

  it('has five tries in ten minutes, for the newest code', async () => {
    const { visitor, to } = await newcomer();
    await ask(visitor, to);
    const right = await codeAt(to);
    for (let i = 0; i < 5; i += 1) expect(code((await enter(visitor, right === '111111' ? '222222' : '111111')).body)).toBe('wrong_code');
    expect(code((await enter(visitor, right)).body)).toBe('code_expired');
    const next = await newcomer();
    await ask(next.visitor, next.to);
    const late = await codeAt(next.to);
    await house.sql(`update address_change set expires_at = now() - interval '1 second'`);
    expect(code((await enter(next.visitor, late)).body)).toBe('code_expired');
    // of somebody else it is no code at all
    const third = await newcomer();
    await ask(third.visitor, third.to);
    expect(code((await enter(visitor, await codeAt(third.to))).body)).toBe('code_expired');
  });

  it('answers the same for a taken address, and tells only whoever reads mail there', async () => {
    const [{ visitor, to }, { visitor: owner }] = [await newcomer(), await newcomer()];
    const [free, taken] = [await ask(visitor, to), await ask(visitor, owner.email)];
    const shape = (body: unknown) => Object.keys(body as object).sort();
    expect([free.status, shape(free.body)]).toEqual([taken.status, shape(taken.body)]);
    expect(code((await enter(visitor, await codeAt(owner.email))).body)).toBe('already_exists');
    expect(((await visitor.get('/me')).body as Me).person.email).toBe(visitor.email);
    expect((await owner.get('/me')).status).toBe(200);
    const own = await ask(visitor, visitor.email);
    expect((own.body as { errors: { pointer: string }[] }).errors[0]?.pointer).toBe('/email');
  });

  it('is undone by whoever reads the old address: by a button, once, within 14 days', async () => {
    const { visitor, to, token, mail } = await moved();
    expect(token).toHaveLength(43);
    expect(mail.html).toContain('It was not me');
    await visitor.post('/me/password', { password: 'our lumber yard opens at six' }, null);
    await enrol(visitor);
    // no GET does anything
    expect((await fetch(`${url}/address-undo`)).status).not.toBe(500);
    expect(((await visitor.get('/me')).body as Me).person.email).toBe(to);
    expect([(await undo(token)).body, (await undo(token)).status]).toEqual([{ email: visitor.email }, 410]);
    expect((await visitor.get('/me')).status).toBe(401);
    // who signs in at the old address is the same person again, with nothing left that somebody else may have set
    const back = new Visitor(house, url, visitor.email);
    await back.signIn();
    expect((await back.get('/me/account')).body as Account).toMatchObject({ password: null, secondStep: { use: 'optional' }, sessions: [{ current: true }] });
    const late = await moved();
    await house.sql(`update address_change set undo_until = now() - interval '1 second' where undone_at is null`);
    expect(code((await undo(late.token)).body)).toBe('link_over');
    expect(code((await undo('x'.repeat(43))).body)).toBe('link_over');
  });

  it('is undone from the first address after several moves, and the later ways back are over', async () => {
    const { visitor, token } = await moved();
    const next = `next${count}@example.net`;
    await ask(visitor, next);
    await enter(visitor, await codeAt(next));
    const mail = await house.mail.wait(`new${count}@example.org`, /Your address was changed/);
    const second = /\/address-undo#(\S+)/.exec(mail.text ?? '')?.[1] ?? '';
    expect((await undo(token)).status).toBe(200);
    expect(code((await undo(second)).body)).toBe('link_over');
    await new Visitor(house, url, visitor.email).signIn();
  });

  it('is told once, and leaves no token in the queue or the database', async () => {
    const { visitor, token } = await moved();
    await until(async () => (await house.sql('select 1 from address_change where told_at is not null and old_email = $1', [visitor.email])).length === 1, 'the word that it was told');
    const everything = await house.sql<{ row: string }>('select row_to_json(c)::text as row from address_change c');
    expect(everything.filter(({ row }) => row.includes(token))).toEqual([]);
    expect(house.mail.to(visitor.email).filter(({ subject }) => /Your address was changed/.test(subject ?? ''))).toHaveLength(1);
  });
});
