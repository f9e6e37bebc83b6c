import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { spawnSync } from 'node:child_process';
import { createHash, randomUUID } from 'node:crypto';
import request from 'supertest';
import { v7 } from 'uuid';
import { changeStates, changeTransitions, mayChange, type ChangeAct } from '@tallypole/shared/schemas/change-states';
import type { Change, ChangeCost, ChangeList } from '@tallypole/shared/schemas/changes';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { join, principalWithFirm } from './support/builders.ts';
import { attachReview, changeAt, changeDraft, costLine, issueChange, signature, signChange, startChange, withPaper } from './support/change-builders.ts';
import { lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House, until } from './support/house.ts';
import type { Visitor } from './support/visitor.ts';

describe('the states of a change', () => {
  it('allow these acts and no others', () => {
    const acts = Object.keys(changeTransitions) as ChangeAct[];
    expect(Object.fromEntries(changeStates.map((state) => [state, acts.filter((act) => mayChange(state, act)).join(' ')]))).toEqual({
      draft: 'edit ask_review review issue',
      in_review: 'edit review issue',
      issued: 'sign_part sign_last ask_again decline lapse withdraw supersede',
      partly_signed: 'sign_part sign_last ask_again decline lapse withdraw supersede',
      approved: '',
      declined: 'supersede',
      lapsed: 'supersede',
      withdrawn: 'supersede',
      superseded: '',
    });
  });
});

describe('changes', () => {
  let house: House;
  let url: string;
  let second: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    ({ url: second } = await house.web());
    firm = await principalWithFirm(house, url);
  });
  afterAll(() => house.close());
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
  });

  const code = (answer: { body: unknown }) => (answer.body as { code: string }).code;
  const detail = (answer: { body: unknown }) => (answer.body as { detail: string }).detail;
  const jobOf = async (who: Visitor) => made<Job>(await who.get(`/jobs/${lent.job.id}`));

  it('are priced line by line with the firm\'s terms; a preview writes nothing and gives the same cents', async () => {
    const draft = changeDraft(lent);
    const preview = made<ChangeCost>(await lent.principal.post(`/jobs/${lent.job.id}/changes/price`, draft));
    // 28 × 43.1875 = 1,209.25; 28 × 29.50 = 826.00; 6.5 × 62 = 403.00; net 786.25; overhead 10 % 78.63, profit 10 % of 864.88: 86.49
    expect(preview.priced).toMatchObject({ netCostCents: 78_625, markupCents: 7_863 + 8_649, priceCents: 95_137 });
    expect(made<ChangeList>(await lent.principal.get(`/jobs/${lent.job.id}/changes`)).items).toEqual([]);
    const change = made<Change>(await lent.principal.post(`/jobs/${lent.job.id}/changes`, draft));
    expect(change).toMatchObject({ number: 1, state: 'draft', chargedCents: 95_137 });
    expect(change.lines.reduce((a, line) => a + line.cents, 0)).toBe(95_137);
  });

  it('are edited with a version, by one manager at a time, and exist for nobody outside until they are sent out', async () => {
    const change = await startChange(lent);
    const { id: _id, ...fields } = changeDraft(lent, { title: 'Deeper joists, great room and hall' });
    const edited = made<Change>(await lent.principal.post(changeAt(lent, change.id), { ...fields, version: change.version }));
    expect(edited).toMatchObject({ title: 'Deeper joists, great room and hall', version: change.version + 1 });
    const stale = await lent.principal.post(changeAt(lent, change.id), { ...fields, version: change.version });
    expect([stale.status, code(stale)]).toEqual([409, 'stale']);
    expect((await lent.ann.get(changeAt(lent, change.id))).status).toBe(404);
    expect(made<ChangeList>(await lent.lender.get(`/jobs/${lent.job.id}/changes`)).items).toEqual([]);
  });

  it('that touch structure are not sent out without their review', async () => {
    const change = await startChange(lent, { structural: true });
    const refused = await lent.principal.post(changeAt(lent, change.id, 'issue'), { version: change.version });
    expect([refused.status, code(refused)]).toEqual([422, 'review_missing']);
    const reviewed = await attachReview(lent, change.id);
    expect(reviewed).toMatchObject({ state: 'in_review', reviews: [{ kind: 'engineered_sheet', reviewerName: 'P. Wren, PE', reviewedOn: '2026-11-20' }] });
    expect((await issueChange(lent, reviewed)).state).toBe('issued');
  });

  it('are mailed with their figures, and signed by both in any order; then they stand in contract and schedule', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const mail = await house.mail.wait(lent.ben.email, /Change 1 for 9 Larkspur Court: \+\$951\.37, please decide by Thursday, March 19, 2099/);
    expect(mail.text).toContain('$400,000.00 -> $400,951.37');
    expect(mail.text).toContain('June 30, 2027 -> July 2, 2027');
    expect(seen.effect).toMatchObject({ before: { contractSumCents: 40_000_000, completionDate: '2027-06-30' }, after: { contractSumCents: 40_095_137, completionDate: '2027-07-02' } });

    const half = made<Change>(await signChange(lent, lent.ben, seen, 'Ben Moss'));
    expect([half.state, (await jobOf(lent.ann)).contractSumTodayCents]).toEqual(['partly_signed', 40_000_000]);
    await house.mail.wait(lent.ann.email, /Change 1 .* Ben Moss has signed/);
    const whole = made<Change>(await signChange(lent, lent.ann, seen));
    expect(whole.state).toBe('approved');
    expect(await jobOf(lent.lender)).toMatchObject({ contractSumTodayCents: 40_095_137, completionDate: '2027-07-02', approvedDays: 2 });
    const lines = await house.sql<{ n: number; cents: number }>(`select count(*)::int as n, sum(scheduled_cents)::int as cents from schedule_line where change_id = $1 and kind = 'change' and milestone_id = $2`, [seen.id, lent.milestoneId.Framing]);
    expect(lines).toEqual([{ n: 3, cents: 95_137 }]);
  });

  it('are kept as the exact paper: its SHA-256 is what was signed, and the joined one is mailed to everybody', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const paper = await request(url).get(`/api/jobs/${lent.job.id}/documents/${seen.document?.id ?? ''}`).set('Cookie', lent.ann.cookie()).buffer(true).parse((res, done) => {
      const chunks: Buffer[] = [];
      res.on('data', (chunk: Buffer) => chunks.push(chunk)).on('end', () => done(null, Buffer.concat(chunks)));
    });
    expect(createHash('sha256').update(paper.body as Buffer).digest('hex')).toBe(seen.document?.sha256);
    const text = spawnSync('pdftotext', ['-layout', '-', '-'], { input: paper.body as Buffer, encoding: 'utf8' }).stdout;
    for (const figure of ['+$951.37', '$400,000.00', '$400,951.37', 'July 2, 2027', 'Deeper joists in the great room', 'as signed + changes approved + this change', seen.effectHash ?? '']) expect(text).toContain(figure);
    expect(text).not.toMatch(/overhead|profit|mark-up/i);

    made(await signChange(lent, lent.ann, seen));
    made(await signChange(lent, lent.ben, seen, 'Ben Moss'));
    for (const who of [lent.ann, lent.ben, lent.lender]) {
      const mail = await house.mail.wait(who.email, /Change 1 for 9 Larkspur Court is signed: \+\$951\.37/);
      const [file] = mail.attachments;
      const sha256 = createHash('sha256').update(file?.content ?? '').digest('hex');
      expect(mail.text).toContain(sha256);
      const joined = spawnSync('pdftotext', ['-layout', '-', '-'], { input: file?.content, encoding: 'utf8' }).stdout;
      for (const words of ['Ann Moss', 'Ben Moss', '+$951.37', seen.document?.sha256 ?? '', 'record stood at entry']) expect(joined).toContain(words);
    }
    const signed = made<Change>(await lent.ann.get(changeAt(lent, seen.id)));
    expect(signed.signedDocument).not.toBeNull();
  });

  it('become one approval when two sign at once on two servers', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const [one, two] = await Promise.all([signChange(lent, lent.ann, seen), lent.ben.at(second).post(changeAt(lent, seen.id, 'sign'), signature(seen, 'Ben Moss'))]);
    expect([one.status, two.status]).toEqual([200, 200]);
    expect((await jobOf(lent.ann)).approvedChangesCents).toBe(95_137);
    expect(await house.sql('select count(*)::int as n from schedule_line where change_id = $1', [seen.id])).toEqual([{ n: 3 }]);
  });

  it('signed in a second tab are signed once: the same form is a replay, another one is told', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const key = randomUUID();
    const body = signature(seen, 'Ann Moss');
    const first = await lent.ann.post(changeAt(lent, seen.id, 'sign'), body, key);
    const again = await lent.ann.post(changeAt(lent, seen.id, 'sign'), body, key);
    expect([first.status, again.status, again.headers['idempotency-replayed']]).toEqual([200, 200, 'true']);
    const tab = await signChange(lent, lent.ann, seen);
    expect([tab.status, detail(tab)]).toEqual([409, 'You have signed this change already.']);
  });

  it('are refused where the mark-up was altered between view and sign, with both versions named', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const terms = { mode: 'margin', marginRate: 2000, laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'keep', flatFeeCents: 0, insuranceRate: 0 } as const;
    const revision = made<Change>(await lent.principal.post(changeAt(lent, seen.id, 'revisions'), changeDraft(lent, { terms, termsReason: 'Agreed on site.' })));
    expect(revision).toMatchObject({ number: 1, revision: 'A', state: 'draft', chargedCents: 98_281 });
    const next = await issueChange(lent, revision);
    const refused = await signChange(lent, lent.ann, seen);
    expect([refused.status, code(refused), detail(refused)]).toEqual([409, 'effect_changed', 'Revision A has taken its place: +$982.81 instead of +$951.37.']);
    const wrongHash = await lent.ann.post(changeAt(lent, next.id, 'sign'), { ...signature(next, 'Ann Moss'), effectHash: seen.effectHash });
    expect(code(wrongHash)).toBe('effect_changed');
    expect(made<Change>(await signChange(lent, lent.ann, next)).state).toBe('partly_signed');
  });

  it('that were out while another one was signed are asked for again with the new figures', async () => {
    const first = await issueChange(lent, await startChange(lent));
    const other = await issueChange(lent, await startChange(lent, { title: 'Another window', lines: [costLine({ description: 'Window', quantity: '1', unitCost: '900' })], days: 0 }));
    made(await signChange(lent, lent.ann, other));
    made(await signChange(lent, lent.ann, first));
    made(await signChange(lent, lent.ben, first, 'Ben Moss'));
    const old = await signChange(lent, lent.ben, other, 'Ben Moss');
    expect(['effect_changed', 'wrong_state']).toContain(code(old));
    const anew = await withPaper(lent, other.id);
    expect(anew.signers.every(({ signedAt }) => signedAt === null)).toBe(true);
    expect(anew.effect?.before.contractSumCents).toBe(40_095_137);
    expect(anew.document?.sha256).not.toBe(other.document?.sha256);
  });

  it('are declined with a reason that the firm is told, withdrawn by the firm, and lapse when their price no longer holds', async () => {
    const declined = await issueChange(lent, await startChange(lent));
    expect((await lent.ann.post(changeAt(lent, declined.id, 'decline'), { reason: '' })).status).toBe(400);
    expect(made<Change>(await lent.ann.post(changeAt(lent, declined.id, 'decline'), { reason: 'We would rather keep the money.' })).state).toBe('declined');
    expect((await house.mail.wait(lent.principal.email, /Change 1 .* was declined/)).text).toContain('We would rather keep the money.');
    expect(code(await signChange(lent, lent.ben, declined, 'Ben Moss'))).toBe('wrong_state');

    const withdrawn = await issueChange(lent, await startChange(lent));
    expect((await lent.ann.post(changeAt(lent, withdrawn.id, 'withdraw'), { reason: 'Not mine to do.' })).status).toBe(403);
    expect(made<Change>(await lent.principal.post(changeAt(lent, withdrawn.id, 'withdraw'), { reason: 'Priced by mistake.' })).state).toBe('withdrawn');

    const lapsing = await issueChange(lent, await startChange(lent));
    // its last day is over: the day is set back where only the owner can, past the guard
    await house.sql('alter table change disable trigger guarded');
    await house.sql(`update change set good_until = '2026-11-01' where id = $1`, [lapsing.id]);
    await house.sql('alter table change enable trigger guarded');
    expect(detail(await signChange(lent, lent.ann, lapsing))).toContain('The price held until a day that is over');
    await house.asQueueOwner(`update graphile_worker._private_jobs set run_at = now() where key = 'lapse_change:${lapsing.id}'`);
    await until(async () => made<Change>(await lent.ann.get(changeAt(lent, lapsing.id))).state === 'lapsed', 'the change to lapse');
    await house.mail.wait(lent.ann.email, /Change 3 .* has lapsed/);
  });

  it('need the person, not only the open browser', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    await house.sql(`update session set present_at = now() - interval '11 minutes'`);
    const refused = await signChange(lent, lent.ann, seen);
    expect([refused.status, code(refused)]).toEqual([403, 'presence_needed']);
    const unsigned = await lent.ann.post(changeAt(lent, seen.id, 'sign'), { ...signature(seen, 'Ann Moss'), consent: false });
    expect(unsigned.status).toBe(400);
  });

  it('show cost and mark-up to the firm alone, prices to those who pay, and neither to the site and the designer', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const inside = made<Change>(await lent.principal.get(changeAt(lent, seen.id)));
    expect(inside.cost?.priced.markupCents).toBe(16_512);
    for (const who of [lent.ann, lent.lender]) {
      const answer = await who.get(changeAt(lent, seen.id));
      expect((answer.body as Change).chargedCents).toBe(95_137);
      expect((answer.body as Change).cost).toBeNull();
      expect(answer.text).not.toMatch(/markup|overhead|profit|unitCost|netCost|43\.1875/i);
    }
    const designer = await join(lent.principal, lent.job.id, 'designer');
    const blind = await designer.get(changeAt(lent, seen.id));
    expect(blind.body).toMatchObject({ chargedCents: null, lines: [], effect: null, cost: null });
    expect(blind.text).not.toContain('95137');
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(changeAt(lent, seen.id))).status).toBe(404);
    const cost = await house.as('app_write', async (client) => {
      await client.query('begin');
      await client.query(`select set_config('app.actor', (select p::text from unnest($1::uuid[]) p), true)`, [[(await house.sql<{ id: string }>('select id from person where email = $1', [lent.ann.email]))[0]?.id]]);
      return (await client.query('select * from change_cost')).rows as object[];
    });
    expect(cost).toEqual([]);
  });

  it('may take away, cost nothing, or be time alone', async () => {
    const less = await issueChange(lent, await startChange(lent, { lines: [costLine({ effect: 'deduct', quantity: '10', unitCost: '100' })], days: 0 }));
    expect(less.chargedCents).toBe(-100_000);
    const gift = await startChange(lent, { noCharge: true });
    expect(gift.chargedCents).toBe(0);
    const time = await issueChange(lent, await startChange(lent, { title: 'Rain in the second week', origin: 'weather', lines: [], days: 4 }));
    expect(time).toMatchObject({ chargedCents: 0, effect: { after: { contractSumCents: 40_000_000, completionDate: '2027-07-04' } } });
    const nothing = await startChange(lent, { lines: [], days: 0 });
    expect((await lent.principal.post(changeAt(lent, nothing.id, 'issue'), { version: nothing.version })).status).toBe(400);
  });

  it('once signed can be altered by nobody, in the database either', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    await expect(house.sql(`update change set charged_cents = 1 where id = $1`, [seen.id])).rejects.toMatchObject({ code: 'TP020' });
    await expect(house.sql(`update change_cost set terms = '{}' where change_id = $1`, [seen.id])).rejects.toMatchObject({ code: 'TP020' });
    made(await signChange(lent, lent.ann, seen));
    made(await signChange(lent, lent.ben, seen, 'Ben Moss'));
    await expect(house.sql(`update change set title = 'Other' where id = $1`, [seen.id])).rejects.toMatchObject({ code: 'TP020' });
    await expect(house.sql(`delete from change_signature where change_id = $1`, [seen.id])).rejects.toMatchObject({ code: 'TP020' });
    await expect(house.sql(`delete from document`)).rejects.toMatchObject({ code: 'TP020' });
  });

  it('are refused with the field named where they make no sense', async () => {
    const at = async (more: object) => {
      const answer = await lent.principal.post(`/jobs/${lent.job.id}/changes`, { ...changeDraft(lent), id: v7(), ...more });
      return [answer.status, ((answer.body as { errors?: { pointer: string }[] }).errors ?? []).map(({ pointer }) => pointer)];
    };
    expect(await at({ days: -1 })).toEqual([400, ['/days']]);
    expect(await at({ lines: [costLine({ quantity: '-1' })] })).toEqual([400, ['/lines/0/quantity']]);
    expect(await at({ lines: [costLine({ quantity: '999999999999', unitCost: '999999999999' })] })).toEqual([400, ['/lines/0']]);
    expect(await at({ terms: { mode: 'margin', marginRate: 10_000, laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'keep', flatFeeCents: 0, insuranceRate: 0 }, termsReason: 'x' })).toEqual([400, ['/terms/marginRate']]);
    expect(await at({ goodUntil: '2027-02-30' })).toEqual([400, ['/goodUntil']]);
    expect((await at({ milestoneId: v7() }))[0]).toBe(409);
  });
});
