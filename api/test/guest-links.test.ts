import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import type { ChildProcess } from 'node:child_process';
import { createHash } from 'node:crypto';
import type pg from 'pg';
import { v7 } from 'uuid';
import { countsAsProof, inspectorsFor, senderSides, type GuestLinks, type GuestVisit, type InspectorFor } from '@tallypole/shared/schemas/guest-links';
import type { MilestoneDetail } from '@tallypole/shared/schemas/milestones';
import type { Photo } from '@tallypole/shared/schemas/photos';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { GuestVisitor, linkInput } from './support/guests.ts';
import { House, until } from './support/house.ts';
import { jpeg } from './support/photos.ts';
import { smallSchedule } from './support/schedule-builders.ts';
import { download, upload } from './support/uploads.ts';
import type { Visitor } from './support/visitor.ts';

describe('what a link can prove', () => {
  it('is decided by who sent it and whose inspector it is', () => {
    const proving = senderSides.flatMap((side) => inspectorsFor.filter((whose) => countsAsProof(side, whose)).map((whose) => `${side}: ${whose}`));
    expect(proving.filter((pair) => pair.startsWith('firm'))).toEqual(['firm: town']);
    expect(proving).toHaveLength(9);
  });
});

describe('an inspector without an account', () => {
  let house: House;
  let url: string;
  let principal: Visitor;
  let firmId: string;
  let homeowner: Visitor;
  let lender: Visitor;
  let worker: ChildProcess;
  let jobId: string;
  let milestones: Record<string, string>;

  beforeAll(async () => {
    house = await House.open();
    worker = await house.worker();
    ({ url } = await house.web());
    ({ principal, firmId } = await principalWithFirm(house, url));
  });
  afterAll(() => house.close());

  beforeEach(async () => {
    await house.sql('delete from rate_limit');
    ({ id: jobId } = await createJob(principal, firmId));
    milestones = (await smallSchedule(principal, jobId)).milestoneId;
    [homeowner, lender] = [await join(principal, jobId, 'homeowner', 'Robin Vale'), await join(principal, jobId, 'lender', 'Ruth Moor')];
  });

  const framing = () => milestones['Framing'] ?? '';
  const code = (answer: { body: unknown }) => (answer.body as { code: string }).code;
  const at = (path = '') => `/jobs/${jobId}/guest-links${path}`;
  const photograph = async (scene = 1) =>
    upload(principal, `/jobs/${jobId}/photos`, { id: v7(), milestoneId: framing(), note: 'North wall' }, { name: 'IMG_1.jpg', content: await jpeg({ scene, width: 320, height: 240, taken: '2026:11:12 09:30:15', offset: '-05:00', at: { latitude: 39.4, longitude: -84.5 } }) });
  const claim = async (version = 1) => {
    await photograph();
    const answer = await principal.post(`/jobs/${jobId}/milestones/${framing()}/claim`, { version, note: '' });
    if (answer.status !== 201) throw new Error(answer.text);
  };
  const seen = (result: string, version: number, more: object = {}) => ({ id: v7(), version, result, seenOn: '2026-01-05', note: '', name: 'Jo Marsh', company: 'Marsh Inspection', license: 'OH-4471', ...more });
  const inspect = (guest: Visitor, body: object, key?: string) => guest.post(`/guest/milestones/${framing()}/inspections`, body, key);
  const milestone = async () => (await homeowner.get(`/jobs/${jobId}/milestones/${framing()}`)).body as MilestoneDetail;

  async function invite(sender: Visitor, onBehalf: InspectorFor, milestoneIds = [framing()]): Promise<{ guest: GuestVisitor; linkId: string }> {
    const input = linkInput({ milestoneIds, onBehalf, note: 'The gate code is on the box.' });
    const answer = await sender.post(at(), input);
    if (answer.status !== 201) throw new Error(answer.text);
    return { guest: new GuestVisitor(house, url, input.email), linkId: input.id };
  }

  it('proves a milestone by the lender\'s link and a mailed code; the record and everybody concerned are told who it was', async () => {
    await claim();
    const { guest, linkId } = await invite(lender, 'lender');
    const mail = await house.mail.wait(guest.email, /^Please look at Framing: 9 Larkspur Court$/);
    expect(mail.text).toContain('Ruth Moor asks you, as the lender\'s inspector, to look at Framing at 9 Larkspur Court');
    expect(mail.text).toContain('"The gate code is on the box."');
    const visit = await guest.enter();
    expect(visit).toMatchObject({ jobName: '9 Larkspur Court', place: '9 Larkspur Court, Maple Glen, OH 45011', senderName: 'Ruth Moor', counts: true, milestones: [{ name: 'Framing', state: 'claimed', version: 2, answeredAt: null }] });
    const answer = await inspect(guest, seen('passed', 2, { note: 'Nailing as drawn.' }));
    expect([answer.status, (answer.body as GuestVisit).milestones[0]?.state]).toEqual([201, 'proven']);
    expect(await milestone()).toMatchObject({
      state: 'proven', percent: 10_000, provenBy: { name: 'Jo Marsh' },
      inspections: [{ result: 'passed', role: 'inspector', independent: true, by: { name: 'Jo Marsh' }, guest: { onBehalf: 'lender', senderSide: 'lender', company: 'Marsh Inspection', license: 'OH-4471' } }],
    });
    const told = await house.mail.wait(principal.email, /^Framing at 9 Larkspur Court is proven$/);
    expect(told.text).toContain('Jo Marsh, Marsh Inspection, OH-4471 (the lender\'s inspector) has looked at Framing and confirms that it is done. In place: 100 %.');
    expect(told.text).toContain('They came by a link that Ruth Moor sent, and entered a code mailed to their address.');
    await house.mail.wait(lender.email, /^Framing at 9 Larkspur Court is proven$/);
    const entries = await house.sql<{ act: string; text: string; guest: boolean }>(
      `select e.data->>'act' as act, e.text, p.guest from record_entry e join person p on p.id = (e.data->>'by')::uuid where e.job_id = $1 and e.text like '%' || $2 || '%' order by seq`,
      [jobId, linkId],
    );
    expect(entries.map(({ act, guest: byGuest }) => [act, byGuest])).toEqual([['guest_link.sent', false], ['guest_link.opened', true], ['milestone.inspected', true]]);
    for (const { text } of entries) expect(text).not.toMatch(/Marsh|marsh|@/);
    expect(entries[2]?.text).toMatch(/"independent":true,.*"senderSide":"lender","whoSha256":"[0-9a-f]{64}"/);
    const links = (await lender.get(at())).body as GuestLinks;
    expect(links.items[0]).toMatchObject({ state: 'done', email: guest.email, mine: true, counts: true });
  });

  it('is shown nothing but the firm\'s name and a masked address before the code, and nothing of the place afterwards', async () => {
    await claim();
    await until(async () => ((await homeowner.get(`/jobs/${jobId}/photos`)).body as { items: Photo[] }).items[0]?.state === 'ready', 'the photo');
    const { guest } = await invite(homeowner, 'homeowner');
    const token = await guest.token();
    const opened = await guest.post('/guest/visits', { token }, null);
    expect(opened.body).toEqual({ firmName: expect.stringMatching(/^Firm \d+$/) as unknown, sentTo: expect.stringMatching(/^i•••@m•••\.example$/) as unknown, expiresAt: expect.any(String) as unknown, confirmed: false });
    expect((await guest.get('/guest/door')).body).toMatchObject({ confirmed: false });
    for (const path of ['/guest/visit', `/guest/photos/${v7()}/small`]) {
      const answer = await guest.get(path);
      expect([path, answer.status, code(answer)]).toEqual([path, 403, 'presence_needed']);
    }
    expect([(await inspect(guest, seen('passed', 2))).status, (await upload(guest, '/guest/photos', { id: v7(), milestoneId: framing() }, { name: 'a.jpg', content: await jpeg() })).status]).toEqual([403, 403]);
    const visit = await guest.enter(token);
    const [photo] = visit.milestones[0]?.photos ?? [];
    expect(photo).toMatchObject({ state: 'ready', place: null, note: 'North wall', takenAt: '2026-11-12T14:30:15.000Z' });
    expect(JSON.stringify(visit)).not.toMatch(/latitude|scheduledCents|\$/);
    expect((await download(guest, `/guest/photos/${photo?.id}/small`)).headers.get('content-type')).toBe('image/jpeg');
    expect((await guest.get(`/jobs/${jobId}/files/${photo?.fileId}`)).status).toBe(401);
  });

  it('adds photos as everybody does, of the link\'s milestones alone', async () => {
    await claim();
    const { guest } = await invite(lender, 'town');
    await guest.enter();
    const id = v7();
    const content = await jpeg({ scene: 7, width: 320, height: 240, at: { latitude: 39.4, longitude: -84.5 } });
    const added = await upload(guest, '/guest/photos', { id, milestoneId: framing(), note: 'Hold-down' }, { name: 'IMG.jpg', content });
    expect([added.status, added.body]).toEqual([201, expect.objectContaining({ id, state: 'stored', place: null, addedBy: expect.objectContaining({ name: 'Jo Marsh' }) as unknown }) as unknown]);
    expect((await upload(guest, '/guest/photos', { id, milestoneId: framing(), note: 'Hold-down' }, { name: 'IMG.jpg', content })).headers['idempotency-replayed']).toBe('true');
    const elsewhere = await upload(guest, '/guest/photos', { id: v7(), milestoneId: milestones['Foundation'] ?? '' }, { name: 'IMG.jpg', content });
    expect([elsewhere.status, (elsewhere.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([400, '/milestoneId']);
    expect((await upload(guest, '/guest/photos', { id: v7(), milestoneId: framing() }, { name: 'a.jpg', content: Buffer.from('no picture') })).status).toBe(415);
    await until(async () => ((await homeowner.get(`/jobs/${jobId}/photos/${id}`)).body as Photo).state === 'ready', 'the guest\'s photo');
    const forHomeowner = (await homeowner.get(`/jobs/${jobId}/photos/${id}`)).body as Photo;
    expect([forHomeowner.addedBy.name, forHomeowner.place?.latitude.toFixed(1)]).toEqual(['Jo Marsh', '39.4']);
  });

  it.each(inspectorsFor)('whom the firm sends as the inspector of the %s is marked; only the town\'s proves', async (whose) => {
    await claim();
    const { guest } = await invite(principal, whose);
    const visit = await guest.enter();
    expect(visit).toMatchObject({ senderSide: 'firm', counts: whose === 'town' });
    expect((await inspect(guest, seen('passed', 2))).status).toBe(201);
    const after = await milestone();
    expect([after.state, after.percent, after.version, after.inspections[0]?.independent, after.inspections[0]?.guest?.senderSide]).toEqual(whose === 'town' ? ['proven', 10_000, 3, true, 'firm'] : ['claimed', 0, 2, false, 'firm']);
    // whoever relies on it hears that the builder sent the link
    const told = await house.mail.wait(homeowner.email, whose === 'town' ? /^Framing at 9 Larkspur Court is proven$/ : /^Framing at 9 Larkspur Court was looked at$/);
    expect(told.text).toContain('sent for the builder');
    expect(told.text?.includes('proves nothing')).toBe(whose !== 'town');
  });

  it('whom the firm sends can refuse a claim: what speaks against the sender counts', async () => {
    await claim();
    const { guest } = await invite(principal, 'firm');
    await guest.enter();
    const bare = await inspect(guest, seen('failed', 2));
    expect([bare.status, (bare.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([400, '/note']);
    expect((await inspect(guest, seen('failed', 2, { note: 'Two braces are missing.' }))).status).toBe(201);
    expect(await milestone()).toMatchObject({ state: 'under_way', claimedAt: null, inspections: [{ independent: false, result: 'failed' }] });
  });

  it('says once what they saw, by the rules of every inspection', async () => {
    const { guest, linkId } = await invite(lender, 'lender', [framing(), milestones['Foundation'] ?? '']);
    await guest.enter();
    expect(code(await inspect(guest, seen('passed', 1)))).toBe('wrong_state');
    await claim();
    expect(code(await inspect(guest, seen('passed', 1)))).toBe('stale');
    const ahead = await inspect(guest, seen('passed', 2, { seenOn: '2099-01-01' }));
    expect((ahead.body as { errors: { pointer: string }[] }).errors[0]?.pointer).toBe('/seenOn');
    const key = v7();
    const body = seen('partial', 2, { percent: 4_000 });
    const twice = await Promise.all([inspect(guest, body, key), inspect(guest, body, key)]);
    expect(twice.map(({ status }) => status)).toEqual([201, 201]);
    expect((await milestone()).percent).toBe(4_000);
    const more = await inspect(guest, seen('partial', 3, { percent: 5_000 }));
    expect([more.status, (more.body as { detail: string }).detail]).toEqual([409, 'What you saw of this milestone is recorded already. Whoever sent the link can send it again.']);
    expect((await guest.post(`/guest/milestones/${milestones['Finish']}/inspections`, seen('passed', 1))).status).toBe(404);
    expect(await house.sql('select 1 from inspection where milestone_id = $1', [framing()])).toHaveLength(1);
    // one of two is answered: the link still opens
    expect(((await lender.get(at())).body as GuestLinks).items.find(({ id }) => id === linkId)?.state).toBe('opened');
  });

  it('needs a code of the last ten minutes to say what they saw, and the visit ends after an hour', async () => {
    await claim();
    const { guest } = await invite(lender, 'lender');
    await guest.enter();
    await house.sql(`update guest_session set confirmed_at = confirmed_at - interval '11 minutes'`);
    const stale = await inspect(guest, seen('passed', 2));
    expect([stale.status, code(stale), (await guest.get('/guest/visit')).status]).toEqual([403, 'presence_needed', 200]);
    await guest.confirm();
    expect((await inspect(guest, seen('passed', 2))).status).toBe(201);
    await house.sql(`update guest_session set expires_at = now()`);
    const over = await guest.get('/guest/visit');
    expect([over.status, code(over)]).toEqual([401, 'visit_over']);
  });

  it('has five tries at a code, which is good for ten minutes and in the visit that asked for it', async () => {
    const { guest } = await invite(lender, 'lender');
    const token = await guest.token();
    await guest.post('/guest/visits', { token }, null);
    await guest.post('/guest/codes', {}, null);
    const right = await guest.guestCode();
    const wrong = right === '000000' ? '111111' : '000000';
    const other = new GuestVisitor(house, url, guest.email);
    await other.post('/guest/visits', { token }, null);
    expect(code(await other.post('/guest/confirm', { code: right }, null))).toBe('code_expired');
    for (let tries = 0; tries < 5; tries += 1) expect(code(await guest.post('/guest/confirm', { code: wrong }, null))).toBe('wrong_code');
    expect(code(await guest.post('/guest/confirm', { code: right }, null))).toBe('code_expired');
    const before = guest.codesSoFar();
    await guest.post('/guest/codes', {}, null);
    const late = await guest.guestCode(before);
    await house.sql(`update guest_code set expires_at = now()`);
    expect(code(await guest.post('/guest/confirm', { code: late }, null))).toBe('code_expired');
    const unproven = guest.cookie().split('=')[1] ?? '';
    await guest.confirm();
    expect((await guest.get('/guest/visit')).status).toBe(200);
    // the code gave the visit a new token: the one before opens nothing
    other.setCookie('tally-guest', unproven);
    expect((await other.get('/guest/door')).status).toBe(401);
    for (let asked = 0; asked < 6; asked += 1) await guest.post('/guest/codes', {}, null);
    expect((await guest.post('/guest/codes', {}, null)).status).toBe(429);
  });

  it('gets one answer to every link that is not good', async () => {
    await claim();
    const { guest, linkId } = await invite(lender, 'lender');
    const token = await guest.token();
    await guest.enter(token);
    const revoked = await lender.post(at(`/${linkId}/revoke`));
    expect((revoked.body as GuestLinks).items[0]?.state).toBe('revoked');
    // an open visit ends with its link
    expect((await guest.get('/guest/visit')).status).toBe(401);
    const second = await invite(lender, 'lender');
    const expired = await second.guest.token();
    await house.sql(`update guest_link set expires_at = now() where id = $1`, [second.linkId]);
    const third = await invite(lender, 'lender');
    const used = await third.guest.token();
    await third.guest.enter(used);
    await inspect(third.guest, seen('passed', 2));
    const answers = await Promise.all([token, expired, used, 'A'.repeat(43)].map((given) => new GuestVisitor(house, url, 'nobody@example.com').post('/guest/visits', { token: given }, null)));
    const shown = answers.map(({ status, body, headers }) => [status, { ...(body as object), requestId: '' }, headers['set-cookie']]);
    expect(new Set(shown.map((answer) => JSON.stringify(answer))).size).toBe(1);
    expect([answers[0]?.status, code(answers[0] ?? { body: {} })]).toEqual([410, 'link_over']);
  });

  it('can be sent the link again: the old one is dead at once, and what is not proven may be answered anew', async () => {
    await claim();
    const { guest, linkId } = await invite(lender, 'lender');
    const old = await guest.token();
    await guest.enter(old);
    await inspect(guest, seen('failed', 2, { note: 'The hold-downs are loose.' }));
    // at once, not only when the worker has made the new one
    await house.kill(worker, 'SIGTERM');
    const again = await lender.post(at(`/${linkId}/again`));
    expect([again.status, (again.body as GuestLinks).items[0]]).toEqual([201, expect.objectContaining({ state: 'on_its_way', milestones: [expect.objectContaining({ answeredAt: null })] })]);
    expect((await guest.post('/guest/visits', { token: old }, null)).status).toBe(410);
    worker = await house.worker();
    await claim(3);
    await guest.enter(await guest.token(1));
    expect((await inspect(guest, seen('passed', 4))).status).toBe(201);
    expect((await milestone()).state).toBe('proven');
    expect(code(await lender.post(at(`/${linkId}/again`)))).toBe('wrong_state');
  });

  it('is sent by those who may, to whom they may; each side keeps its own links', async () => {
    const site = framing();
    const errors = async (sender: Visitor, more: object) => {
      const answer = await sender.post(at(), { ...linkInput({ milestoneIds: [site], onBehalf: 'town' }), ...more });
      return [answer.status, (answer.body as { errors?: { pointer: string }[] }).errors?.[0]?.pointer ?? code(answer)];
    };
    expect(await errors(lender, { onBehalf: 'homeowner' })).toEqual([400, '/onBehalf']);
    expect(await errors(homeowner, { onBehalf: 'firm' })).toEqual([400, '/onBehalf']);
    expect(await errors(homeowner, { email: principal.email })).toEqual([400, '/email']);
    expect(await errors(lender, { milestoneIds: [v7()] })).toEqual([400, '/milestoneIds']);
    expect(await errors(lender, { milestoneIds: [site, site] })).toEqual([400, '/milestoneIds']);
    expect(await errors(lender, { days: 31 })).toEqual([400, '/days']);
    expect(await errors(await join(principal, jobId, 'inspector'), {})).toEqual([403, 'not_allowed']);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect(await errors(stranger, {})).toEqual([404, 'not_found']);

    const { linkId, guest } = await invite(lender, 'lender');
    for (const [who, status] of [[principal, 403], [homeowner, 403], [stranger, 404]] as const) expect((await who.post(at(`/${linkId}/revoke`))).status).toBe(status);
    const [shown] = ((await principal.get(at())).body as GuestLinks).items;
    expect(shown).toMatchObject({ id: linkId, mine: false, sentBy: { name: 'Ruth Moor' } });
    expect(shown?.email).not.toBe(guest.email);
    expect((await stranger.get(at())).status).toBe(404);
  });

  it('leaves no visit and no code behind for longer than a month', async () => {
    const { guest } = await invite(lender, 'lender');
    await guest.enter();
    const left = async () => (await house.sql<{ visits: number; codes: number }>('select (select count(*)::int from guest_session) as visits, (select count(*)::int from guest_code) as codes'))[0];
    await house.sql(`update guest_session set expires_at = now() - interval '31 days'`);
    await house.sql(`update guest_session set expires_at = now() - interval '29 days' where id = (select id from guest_session order by id desc limit 1)`);
    await house.asQueueOwner(`select graphile_worker.add_job('sweep_guests')`);
    await until(async () => (await left())?.visits === 1, 'the sweep');
    expect(await left()).toEqual({ visits: 1, codes: 1 });
  });

  it('is shut out by the database itself from everything but the functions of their link', async () => {
    await claim();
    const { guest, linkId } = await invite(lender, 'lender');
    await guest.enter();
    const [{ person_id: personId } = { person_id: '' }] = await house.sql<{ person_id: string }>('select person_id from guest_link where id = $1', [linkId]);
    const actingAs = (link: string, sql: string) =>
      house.as('app_write', async (client: pg.Client) => {
        await client.query('begin');
        await client.query(`select set_config('app.actor', $1, true), set_config('app.guest_link', $2, true)`, [personId, link]);
        return (await client.query(sql)).rows as pg.QueryResultRow[];
      });
    for (const table of ['job', 'milestone', 'photo', 'file', 'inspection', 'guest_link', 'guest_inspection', 'record_entry', 'firm', 'job_member']) expect([table, await actingAs(linkId, `select 1 from ${table}`)]).toEqual([table, []]);
    for (const table of ['guest_session', 'guest_code']) await expect(actingAs(linkId, `select 1 from ${table}`)).rejects.toMatchObject({ code: '42501' });
    await expect(actingAs('', 'select app.guest_inspector_visit()')).rejects.toMatchObject({ code: 'TP002' });
    // a visit whose code was not entered names no link, whatever the service asks for
    const early = new GuestVisitor(house, url, guest.email);
    await early.post('/guest/visits', { token: await guest.token() }, null);
    const visit = createHash('sha256').update(early.cookie().split('=')[1] ?? '').digest();
    await expect(house.as('app_read', async (client: pg.Client) => {
      await client.query('begin');
      expect((await client.query('select confirmed_at from app.act_as_guest($1, now())', [visit])).rows).toEqual([{ confirmed_at: null }]);
      return (await client.query('select app.guest_inspector_visit()')).rows as pg.QueryResultRow[];
    })).rejects.toMatchObject({ code: 'TP002' });
    await expect(actingAs(linkId, `select app.append_guest_record('{"by":"${v7()}"}')`)).rejects.toMatchObject({ code: '42501' });
    await expect(actingAs(linkId, `select app.record_guest_inspection('${v7()}', '${milestones['Finish']}', 'passed', 10000, '', '2026-01-05', true, 'x', 'y', '', 'proven', now())`)).rejects.toMatchObject({ code: '42501' });
  });
});
