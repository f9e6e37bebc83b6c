import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import sharp from 'sharp';
import { v7 } from 'uuid';
import { verifyChain } from '@tallypole/shared/record';
import type { Change, ChangeList } from '@tallypole/shared/schemas/changes';
import type { FirmSettings, PeopleWhoLeft } from '@tallypole/shared/schemas/firms';
import type { MilestoneDetail } from '@tallypole/shared/schemas/milestones';
import type { RecordPart } from '@tallypole/shared/schemas/record';
import { principalWithFirm } from './support/builders.ts';
import { changeAt, issueChange, signChange, startChange } from './support/change-builders.ts';
import { lentJob, made, prove, type LentJob } from './support/draw-builders.ts';
import { GuestVisitor, linkInput } from './support/guests.ts';
import { House, until } from './support/house.ts';
import { readPage } from './support/pdf-text.ts';
import { download, upload, type Attachment } from './support/uploads.ts';
import { Visitor } from './support/visitor.ts';

const LETTERHEAD = { street: '14 Mill Lane', city: 'Fallbrook', state: 'OH', zip: '45011', phone: '(513) 555-0142', license: 'OH-GC 20411' };

describe('the settings of a firm', () => {
  let house: House;
  let url: string;

  beforeAll(async () => {
    house = await House.open();
    ({ url } = await house.web());
    await house.worker({ env: { PUBLIC_URL: url } });
  });
  afterAll(() => house.close());

  const code = (answer: { body: unknown }) => (answer.body as { code: string }).code;
  const pointers = (answer: { body: unknown }) => ((answer.body as { errors?: { pointer: string }[] }).errors ?? []).map(({ pointer }) => pointer);
  const input = (more: object = {}) => ({ version: 1, name: 'Birch and Son', ...LETTERHEAD, siteSeesPrices: false, ...more });
  const idOf = async (email: string) => (await house.sql<{ id: string }>('select id from person where email = $1', [email]))[0]?.id ?? '';

  async function member(principal: Visitor, firmId: string, role: string, name: string): Promise<Visitor> {
    const somebody = new Visitor(house, url, `${v7()}@members.example`);
    made(await principal.post(`/firms/${firmId}/invitations`, { id: v7(), email: somebody.email, name, role }));
    await somebody.signIn();
    return somebody;
  }

  it('are a principal\'s, with a version, an address that is whole or none, and a phone number', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const manager = await member(principal, firmId, 'manager', 'Mia Stone');
    const { principal: stranger } = await principalWithFirm(house, url);
    const at = `/firms/${firmId}/settings`;
    expect(made<FirmSettings>(await principal.get(at))).toMatchObject({ street: '', siteSeesPrices: false, version: 1, logo: { state: 'none' } });
    for (const [who, status] of [[manager, 403], [stranger, 404]] as const) {
      expect([(await who.get(at)).status, (await who.post(at, input())).status, (await who.get(`/firms/${firmId}/logo`)).status, (await who.get(`/firms/${firmId}/people-who-left`)).status]).toEqual([status, status, status, status]);
    }
    for (const [more, wrong] of [[{ zip: '' }, ['/zip']], [{ zip: '450' }, ['/zip']], [{ state: 'Ohio' }, ['/state']], [{ phone: 'call me' }, ['/phone']], [{ name: 'x' }, ['/name']], [{ more: 1 }, ['/']]] as const) {
      const answer = await principal.post(at, input(more));
      expect([answer.status, pointers(answer)]).toEqual([400, wrong]);
    }
    expect(made<FirmSettings>(await principal.post(at, input()))).toMatchObject({ name: 'Birch and Son', ...LETTERHEAD, version: 2 });
    const late = await principal.post(at, input());
    expect([late.status, late.body]).toEqual([409, expect.objectContaining({ code: 'stale', version: 2 })]);
    expect(await house.sql('select name from person where system_of = $1', [firmId])).toEqual([{ name: 'Birch and Son' }]);
    // a change of somebody else's settings is refused by the database too
    await expect(house.as('app_write', async (client) => {
      await client.query(`select set_config('app.actor', $1, false)`, [await idOf(manager.email)]);
      return (await client.query(`select app.set_firm_settings($1, 2, 'Mine', '', '', '', '', '', '', true)`, [firmId])).rows;
    })).rejects.toMatchObject({ code: '42501' });
  });

  it('take a logo by its content, make it anew and small, and refuse everything else', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const send = (file?: Attachment) => upload(principal, `/firms/${firmId}/logo`, { note: 'x' }, file);
    const drawn = sharp({ create: { width: 1_200, height: 480, channels: 4, background: '#3b3a86' } });
    const logo = async () => made<FirmSettings>(await principal.get(`/firms/${firmId}/settings`)).logo;
    const svg = '<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>';
    for (const file of [{ name: 'logo.png', content: Buffer.from('no picture') }, { name: 'logo.png', content: Buffer.from(svg) }, { name: 'logo.webp', content: await drawn.clone().webp().toBuffer() }]) {
      const refused = await send(file);
      expect([refused.status, (refused.body as { detail: string }).detail]).toEqual([415, 'This is not a PNG or JPEG picture.']);
    }
    expect(pointers(await send())).toEqual(['/file']);
    const large = await send({ name: 'logo.png', content: Buffer.concat([await drawn.clone().png().toBuffer(), Buffer.alloc(1_000_001)]) });
    expect([large.status, (large.body as { detail: string }).detail]).toEqual([413, 'The file must be smaller than 1 MB.']);

    const whole = await drawn.clone().jpeg().withExif({ IFD0: { Make: 'Larkspur' } }).toBuffer();
    expect((await send({ name: 'logo.jpg', content: whole })).body).toMatchObject({ logo: { state: 'stored', version: 1 } });
    await until(async () => (await logo()).state === 'ready', 'the logo');
    const shown = await download(principal, `/firms/${firmId}/logo`);
    expect([shown.headers.get('content-type'), shown.headers.get('content-security-policy')]).toEqual(['image/png', "sandbox; default-src 'none'"]);
    const { format, width, height, exif } = await sharp(shown.content).metadata();
    expect([format, width, height, exif]).toEqual(['png', 600, 240, undefined]);
    expect(await house.sql('select 1 from firm_logo where firm_id = $1 and sent is null', [firmId])).toHaveLength(1);

    made(await send({ name: 'logo.jpg', content: whole.subarray(0, 200) }));
    await until(async () => (await logo()).state === 'unreadable', 'the broken logo');
    expect(await logo()).toMatchObject({ trouble: 'The picture is damaged, or has more than 16 million pixels.', version: 2 });
    const bomb = await sharp({ create: { width: 8_000, height: 8_000, channels: 3, background: '#ffffff' } }).png().toBuffer();
    expect(bomb.length).toBeLessThan(1_000_000);
    made(await send({ name: 'logo.png', content: bomb }));
    await until(async () => (await logo()).version === 3 && (await logo()).state === 'unreadable', 'the pixel bomb');
    made(await principal.post(`/firms/${firmId}/logo/remove`));
    expect((await logo()).state).toBe('none');
    expect((await principal.get(`/firms/${firmId}/logo`)).status).toBe(404);
  });

  it('stand on the paper of a change: name, address, phone, license and logo', async () => {
    const lent = await lentJob(house, url);
    const paper = async (change: Change) => readPage((await download(lent.ann, `/jobs/${lent.job.id}/documents/${change.document?.id}`)).content);
    const plain = await paper(await issueChange(lent, await startChange(lent)));
    expect([plain.pictures, plain.text.includes('14MillLane')]).toEqual([0, false]);
    made(await lent.principal.post(`/firms/${lent.firmId}/settings`, input()));
    made(await upload(lent.principal, `/firms/${lent.firmId}/logo`, {}, { name: 'logo.png', content: await sharp({ create: { width: 300, height: 100, channels: 3, background: '#37664a' } }).png().toBuffer() }));
    await until(async () => (await house.sql(`select 1 from firm_logo where firm_id = $1 and state = 'ready'`, [lent.firmId])).length === 1, 'the logo');
    const { text, pictures } = await paper(await issueChange(lent, await startChange(lent, { title: 'Deeper footings' })));
    expect(pictures).toBe(1);
    expect(text).toMatch(/^BirchandSon14MillLaneFallbrook,OH45011\(513\)555-0142·LicenseOH-GC20411Change2:Deeperfootings/);
  });

  it('let the site see what changes cost the homeowners only where the firm says so, and never what they cost the firm', async () => {
    const lent = await lentJob(house, url);
    const site = await member(lent.principal, lent.firmId, 'site', 'Lou Ferris');
    const change = await issueChange(lent, await startChange(lent));
    made(await signChange(lent, lent.ann, change));
    made(await signChange(lent, lent.ben, change, 'Ben Moss'));
    const seen = async () => {
      const list = made<ChangeList>(await site.get(`/jobs/${lent.job.id}/changes`));
      const one = made<Change>(await site.get(changeAt(lent, change.id)));
      return { listed: list.items.map(({ chargedCents }) => chargedCents), approved: list.approvedCents, charged: one.chargedCents, lines: one.lines.length, hidden: [one.cost, one.effect, one.document, one.steps] };
    };
    const hidden = [null, null, null, null];
    expect(await seen()).toEqual({ listed: [null], approved: null, charged: null, lines: 0, hidden });
    made(await lent.principal.post(`/firms/${lent.firmId}/settings`, input({ siteSeesPrices: true })));
    const { chargedCents, lines } = made<Change>(await lent.principal.get(changeAt(lent, change.id)));
    expect(await seen()).toEqual({ listed: [chargedCents], approved: chargedCents, charged: chargedCents, lines: lines.length, hidden });
    expect(chargedCents).toBeGreaterThan(0);
    for (const path of ['/draws', '/money', '/loan']) expect([path, (await site.get(`/jobs/${lent.job.id}${path}`)).status]).toEqual([path, 403]);
    const designer = new Visitor(house, url, `${v7()}@people.example`);
    made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id: v7(), email: designer.email, name: 'Greta Wren', role: 'designer' }));
    await designer.signIn();
    expect(made<Change>(await designer.get(changeAt(lent, change.id))).chargedCents).toBeNull();
  });

  describe('and what is personal', () => {
    let lent: LentJob;

    const whoLeft = async () => made<PeopleWhoLeft>(await lent.principal.get(`/firms/${lent.firmId}/people-who-left`)).items;
    const erase = (personId: string, by = lent.principal) => by.post(`/firms/${lent.firmId}/people-who-left/${personId}/erase`);

    beforeAll(async () => {
      lent = await lentJob(house, url);
    });

    it('is erased for somebody who left: the record verifies, what was signed stays, nobody signs in as them', async () => {
      made(await lent.ben.post('/me/name', { name: 'Benedict Qvist' }, null));
      const change = await issueChange(lent, await startChange(lent));
      made(await signChange(lent, lent.ann, change));
      made(await signChange(lent, lent.ben, change, 'Benedict Qvist'));
      await prove(lent, 'Foundation');
      const ben = await idOf(lent.ben.email);
      expect((await erase(ben)).status).toBe(404);
      made(await lent.principal.post(`/jobs/${lent.job.id}/people/${ben}/remove`, { role: 'homeowner' }));
      expect(await whoLeft()).toMatchObject([{ personId: ben, name: 'Benedict Qvist', places: [{ role: 'homeowner', place: '9 Larkspur Court' }], elsewhere: false, erased: false }]);
      await house.mail.wait(lent.ben.email, /^You are no longer on/);
      await until(async () => (await house.sql('select 1 from notice where person_id = $1 and sent_at is null', [ben])).length === 0, 'the mails');
      expect((await erase(ben, lent.ann)).status).toBe(404);
      expect(made<PeopleWhoLeft>(await erase(ben)).items).toMatchObject([{ personId: ben, name: 'Name erased', erased: true }]);

      // nowhere in the database but under what he signed, which is a contract; mails to others and answered keys go when their time is over
      const inTime = ['command.answer', 'notice.data'];
      expect((await mentioning([lent.ben.email])).filter((place) => !inTime.includes(place))).toEqual([]);
      expect((await mentioning(['Benedict Qvist'])).filter((place) => !inTime.includes(place))).toEqual(['change_signature.typed_name']);
      expect(await house.sql(`select 1 from notice where person_id = $1 and data::text like '%Qvist%'`, [ben])).toEqual([]);
      expect((await lent.ben.get('/me')).status).toBe(401);
      const kept = made<Change>(await lent.principal.get(changeAt(lent, change.id)));
      expect(kept.signers.map(({ name }) => name)).toEqual(['Ann Moss', 'Name erased']);
      const part = made<RecordPart>(await lent.ann.get(`/jobs/${lent.job.id}/record`));
      expect(part.entries.at(-1)?.text).toContain('"act":"person.erased"');
      expect(await verifyChain(part.entries, [])).toMatchObject({ holds: true });

      // the address is free: whoever has it now is somebody new
      const again = new Visitor(house, url, lent.ben.email);
      expect((await again.signIn()).person).toMatchObject({ name: null });
      expect((await again.get(`/jobs/${lent.job.id}`)).status).toBe(404);
    });

    it('is erased for an inspector who came by a link', async () => {
      const link = linkInput({ milestoneIds: [lent.milestoneId.Framing], onBehalf: 'lender', name: 'Jo Marsh' });
      made(await lent.lender.post(`/jobs/${lent.job.id}/guest-links`, link));
      const guest = new GuestVisitor(house, url, link.email);
      await guest.enter();
      made(await lent.principal.post(`/jobs/${lent.job.id}/milestones/${lent.milestoneId.Framing}/start`, { version: 1 }));
      const seen = { id: v7(), version: 2, result: 'partial', percent: 5_000, seenOn: '2026-01-05', note: '', name: 'Jo Marsh', company: 'Marsh Inspection', license: 'OH-4471' };
      made(await guest.post(`/guest/milestones/${lent.milestoneId.Framing}/inspections`, seen));
      await house.mail.wait(lent.lender.email, /^Framing at 9 Larkspur Court is done in part$/);
      await until(async () => (await house.sql('select 1 from notice where sent_at is null')).length === 0, 'the mails');
      const inspector = (await whoLeft()).find(({ name }) => name === 'Jo Marsh');
      made(await erase(inspector?.personId ?? ''));
      const [look] = made<MilestoneDetail>(await lent.ann.get(`/jobs/${lent.job.id}/milestones/${lent.milestoneId.Framing}`)).inspections;
      expect(look).toMatchObject({ percent: 5_000, by: { name: 'Name erased' }, guest: { company: null, license: null, onBehalf: 'lender' } });
      expect((await guest.get('/guest/visit')).status).toBe(401);
      const part = made<RecordPart>(await lent.ann.get(`/jobs/${lent.job.id}/record`));
      expect(await verifyChain(part.entries, [])).toMatchObject({ holds: true });
    });

    it('stays while somebody is still here or elsewhere, and is nobody else\'s to erase', async () => {
      const other = await lentJob(house, url);
      const ann = await idOf(other.ann.email);
      made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id: v7(), email: other.ann.email, name: 'Ann Moss', role: 'homeowner' }));
      made(await other.ann.post('/invitations/accept', {}, null));
      made(await other.principal.post(`/jobs/${other.job.id}/people/${ann}/remove`, { role: 'homeowner' }));
      const refused = await other.principal.post(`/firms/${other.firmId}/people-who-left/${ann}/erase`);
      expect([refused.status, code(refused)]).toEqual([409, 'wrong_state']);
      expect((await erase(ann)).status).toBe(404);
      expect((await other.ann.get('/me')).status).toBe(200);
    });
  });

  /** Every column of every table that still says one of these words. */
  async function mentioning(words: string[]): Promise<string[]> {
    const columns = await house.sql<{ table_name: string; column_name: string }>(
      `select c.table_name, c.column_name from information_schema.columns c join information_schema.tables t using (table_schema, table_name)
       where c.table_schema = 'public' and t.table_type = 'BASE TABLE' and c.data_type in ('text', 'jsonb', 'json')`,
    );
    const found: string[] = [];
    for (const { table_name: table, column_name: column } of columns) {
      const rows = await house.sql(`select 1 from "${table}" where ${words.map((_, i) => `"${column}"::text like '%' || $${i + 1} || '%'`).join(' or ')} limit 1`, words);
      if (rows.length > 0) found.push(`${table}.${column}`);
    }
    return found;
  }
});
