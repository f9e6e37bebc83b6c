import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import { v7 } from 'uuid';
import { drawStates, drawTransitions, mayDraw, mayReview, reviewStates, reviewTransitions, type DrawAct, type ReviewAct } from '@tallypole/shared/schemas/draw-states';
import type { Draw, DrawList } from '@tallypole/shared/schemas/draws';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { principalWithFirm } from './support/builders.ts';
import { approve, approvedDraw, drawAt, ledgerState, lentJob, made, payDeposit, prove, sentDraw, type LentJob } from './support/draw-builders.ts';
import { House } from './support/house.ts';

describe('the states of a draw and of its review', () => {
  it('allow these acts and no others', () => {
    const acts = Object.keys(drawTransitions) as DrawAct[];
    expect(Object.fromEntries(drawStates.map((state) => [state, acts.filter((act) => mayDraw(state, act)).join(' ')]))).toEqual({
      draft: 'adjust submit void',
      submitted: 'object return approve void',
      returned: 'adjust submit void',
      approved: 'pay pay_part pay_rest',
      part_paid: 'pay pay_part pay_rest take_back',
      paid: 'pay_part take_back',
      void: '',
    });
    const reviews = Object.keys(reviewTransitions) as ReviewAct[];
    expect(Object.fromEntries(reviewStates.map((state) => [state, reviews.filter((act) => mayReview(state, act)).join(' ')]))).toEqual({
      not_needed: 'order',
      ordered: 'order inspect',
      inspected: 'order inspect allow',
      allowed: 'order allow fund_part fund_rest',
      funded: '',
    });
  });
});

describe('draws', () => {
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
  const get = async (who = lent.principal, id = '') => made<Draw>(await who.get(drawAt(lent, id)));

  it('are drafted from what is proven in one action: proven milestones whole, general lines by elapsed time', async () => {
    await prove(lent, 'Foundation');
    const draft = made<Draw>(await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: '2026-11-30' }));
    // supervision: 30,000.00 × 76 of 288 days, computed by hand
    expect(draft.lines.map(({ number, workCents }) => [number, workCents])).toEqual([['1', 5_000_000], ['2', 5_000_000], ['3', 0], ['4', 0], ['5', 0], ['6', 791_667]]);
    expect(draft).toMatchObject({ number: 1, state: 'draft', reviewState: 'not_needed' });
    const again = await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: '2026-11-30' });
    expect([again.status, code(again)]).toEqual([409, 'wrong_state']);
    expect((await lent.ann.get(drawAt(lent, draft.id))).status).toBe(404);
    expect(made<DrawList>(await lent.ann.get(`/jobs/${lent.job.id}/draws`)).items).toEqual([]);
  });

  it('are adjusted by percent or sum, with a version, and never past a line or below what was approved', async () => {
    await prove(lent, 'Foundation');
    const { id, version } = made<Draw>(await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: '2026-11-30' }));
    const adjust = (lines: object[], at = version) => lent.principal.post(drawAt(lent, id, 'lines'), { version: at, lines });
    const past = await adjust([{ lineId: lent.line['3'], workCents: 8_000_001 }]);
    expect([past.status, (past.body as { errors: object[] }).errors]).toEqual([400, [{ pointer: '/lines/2/workCents', code: 'rule', message: "Must not go past the line's scheduled value." }]]);
    expect((await adjust([{ lineId: lent.line['3'], workCents: 1, workRate: 1 }])).status).toBe(400);
    const done = made<Draw>(await adjust([{ lineId: lent.line['3'], workRate: 3_333 }]));
    expect(done.lines[2]).toMatchObject({ workCents: 2_666_400, workRate: 3_333, thisDrawCents: 2_666_400, leftCents: 5_333_600 });
    const stale = await adjust([{ lineId: lent.line['3'], workCents: 0 }]);
    expect([stale.status, stale.body]).toEqual([409, expect.objectContaining({ code: 'stale', version: done.version }) as unknown]);
    expect((await get(lent.principal, id)).lines[2]?.workCents).toBe(2_666_400);
  });

  it('come to the same cents on every page, for everybody, and in the mails', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    const sent = await sentDraw(lent);
    // by hand: 100,000 + 7,500 + 28,000 + 4,200 = 139,700.00; 5 % held; deposit 20,000 × 139,700 ÷ 400,000 = 6,985.00
    const figures = { workInPlaceCents: 13_550_000, materialsOnHandCents: 420_000, retainageHeldCents: 698_500, earnedToDateCents: 13_271_500, depositUsedNowCents: 698_500, dueNowCents: 12_573_000, leftToBillCents: 26_728_500 };
    for (const who of [lent.principal, lent.ann, lent.ben, lent.lender]) {
      const seen = await get(who, sent.id);
      expect(seen.summary).toMatchObject(figures);
      expect([seen.dueCents, seen.homeownerCents, seen.loanCents]).toEqual([12_573_000, 3_000_000, 9_573_000]);
      expect(seen.steps.dueNow.result).toEqual({ kind: 'money', cents: 12_573_000 });
      expect(made<DrawList>(await who.get(`/jobs/${lent.job.id}/draws`)).items[0]).toMatchObject({ dueCents: 12_573_000, homeownerCents: 3_000_000, loanCents: 9_573_000 });
      expect(made<JobMoney>(await who.get(`/jobs/${lent.job.id}/money`)).draws[0]).toMatchObject({ dueCents: 12_573_000, homeownerCents: 3_000_000, loanCents: 9_573_000 });
    }
    const mail = await house.mail.wait(lent.ann.email, /^Draw 1, 9 Larkspur Court: \$125,730\.00 to approve$/);
    for (const words of ['You: $30,000.00', 'The loan: $95,730.00', 'Held back (retainage) to date: $6,985.00', 'Left to bill after this: $267,285.00', `/draws/${sent.id}`]) expect(mail.text).toContain(words);
    const toLender = await house.mail.wait(lent.lender.email, /^Draw 1, 9 Larkspur Court: \$95,730\.00 asked of the loan$/);
    expect(toLender.html).toContain('$95,730.00');
  });

  it('are approved by both homeowners, each for exactly what was shown, and booked once', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    const { id, effectHash } = await sentDraw(lent);
    const wrong = await lent.ann.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash: 'f'.repeat(64) });
    expect([wrong.status, code(wrong)]).toEqual([409, 'effect_changed']);
    const first = made<Draw>(await lent.ann.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash }));
    expect([first.state, first.approvedByMe, first.awaited.map(({ name }) => name)]).toEqual(['submitted', true, ['Ben Moss']]);
    expect((await ledgerState(house, lent.job.id)).accounts).toEqual({ bank: 2_000_000, deposit_held: -2_000_000 });
    const again = await lent.ann.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash });
    expect([again.status, code(again)]).toEqual([409, 'wrong_state']);
    const done = await approve(lent, lent.ben, id);
    expect(done).toMatchObject({ state: 'approved', dueCents: 12_573_000, openHomeownerCents: 3_000_000, openLoanCents: 9_573_000, effectHash });
    expect(done.dueOn).toMatch(/^\d{4}-\d{2}-\d{2}$/);
    const ledger = await ledgerState(house, lent.job.id);
    expect(ledger).toEqual({
      sum: 0,
      owed: 12_573_000,
      byDraws: 12_573_000,
      accounts: { bank: 2_000_000, billed_work: -13_970_000, deposit_held: -1_301_500, 'homeowner_receivable/homeowner': 3_000_000, 'homeowner_receivable/loan': 9_573_000, retainage_receivable: 698_500 },
    });
    const money = made<JobMoney>(await lent.ben.get(`/jobs/${lent.job.id}/money`));
    expect([money.billed.cents, money.approved.cents, money.paid.cents, money.open.cents, money.retainageHeld.cents, money.leftToBill.cents, money.depositLeft.cents]).toEqual([13_970_000, 12_573_000, 0, 12_573_000, 698_500, 26_728_500, 1_301_500]);
    expect(money.billed.step.inputs).toHaveLength(1);
    expect(money.fees).toBeNull();
    const mail = await house.mail.wait(lent.ben.email, /^Draw 1, 9 Larkspur Court: you pay \$30,000\.00 by /);
    expect(mail.text).toContain('The loan: $95,730.00');
    await house.mail.wait(lent.principal.email, /^Draw 1, 9 Larkspur Court approved: \$125,730\.00$/);
    await house.mail.wait(lent.lender.email, /^Draw 1, 9 Larkspur Court approved: \$95,730\.00 to fund$/);
  });

  it('can be objected to line by line: the rest is approved, the difference stays left to bill, and an earlier approval is asked for again', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    await approve(lent, lent.ann, id);
    const tooMuch = await lent.ben.post(drawAt(lent, id, 'objections'), { id: v7(), lineId: lent.line['3'], objectedCents: 3_220_001, reason: 'Two joists are cracked.' });
    expect([tooMuch.status, (tooMuch.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([400, '/objectedCents']);
    const objected = made<Draw>(await lent.ben.post(drawAt(lent, id, 'objections'), { id: v7(), lineId: lent.line['3'], objectedCents: 800_000, reason: 'Two joists are cracked.' }));
    // 8,000.00 less billed: 400.00 less held, 400.00 less of the deposit, 7,200.00 less due, all of it the loan's
    expect([objected.dueCents, objected.homeownerCents, objected.loanCents]).toEqual([11_853_000, 3_000_000, 8_853_000]);
    expect(objected.lines[2]).toMatchObject({ workCents: 2_000_000, onHandCents: 420_000, leftCents: 5_580_000, objection: { objectedCents: 800_000, reason: 'Two joists are cracked.', by: 'Ben Moss' } });
    expect(objected.awaited.map(({ name }) => name)).toEqual(['Ann Moss', 'Ben Moss']);
    const told = await house.mail.wait(lent.ann.email, /objected to$/);
    expect(told.text).toContain('What is due has changed: $118,530.00.');
    await house.mail.wait(lent.principal.email, /: \$8,000\.00 objected to$/);
    expect(house.mail.to(lent.ben.email).filter(({ subject }) => /objected/.test(subject ?? ''))).toEqual([]);

    expect((await approve(lent, lent.ben, id)).state).toBe('submitted');
    const done = await approve(lent, lent.ann, id);
    expect([done.state, done.dueCents, done.lines[2]?.workCents]).toEqual(['approved', 11_853_000, 2_000_000]);
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 11_853_000, byDraws: 11_853_000 });

    const kept = await house.sql<{ work: number; hand: number; asked: number }>(
      `select l.work_cents::float8 as work, l.on_hand_cents::float8 as hand, (d.submitted->'basis'->'draw'->'lines'->2->>'workCents')::float8 as asked
       from draw_line l join draw d on d.id = l.draw_id where l.draw_id = $1 and l.line_id = $2`, [id, lent.line['3']]);
    expect(kept).toEqual([{ work: 2_000_000, hand: 420_000, asked: 2_800_000 }]);
    // the next draw starts from what was approved
    const next = made<Draw>(await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: '2026-12-31' }));
    expect(next.lines[2]).toMatchObject({ workCents: 2_000_000, onHandCents: 420_000, billedBeforeCents: 2_420_000, thisDrawCents: 0 });
    expect(next.summary.billedBeforeCents).toBe(12_511_500);
  });

  it('take back an objection, and go back to the builder with a reason', async () => {
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    const before = await get(lent.ann, id);
    const objection = { id: v7(), lineId: lent.line['1'] ?? '', objectedCents: 100, reason: 'Not so.' };
    made(await lent.ann.post(drawAt(lent, id, 'objections'), objection));
    const withdrawn = made<Draw>(await lent.ann.post(drawAt(lent, id, `objections/${objection.id}/withdraw`)));
    expect([withdrawn.dueCents, withdrawn.effectHash, withdrawn.lines[0]?.objection]).toEqual([before.dueCents, before.effectHash, null]);
    await approve(lent, lent.ben, id);
    const returned = made<Draw>(await lent.ann.post(drawAt(lent, id, 'return'), { reason: 'The footing was measured wrong.' }));
    expect([returned.state, returned.returnReason, returned.approvals]).toEqual(['returned', 'The footing was measured wrong.', []]);
    expect((await house.mail.wait(lent.principal.email, /^Draw 1, 9 Larkspur Court came back$/)).text).toContain('The footing was measured wrong.');
    const fixed = made<Draw>(await lent.principal.post(drawAt(lent, id, 'lines'), { version: returned.version, lines: [{ lineId: lent.line['1'], workCents: 4_900_000 }] }));
    const resent = made<Draw>(await lent.principal.post(drawAt(lent, id, 'submit'), { version: fixed.version }));
    expect([resent.state, resent.awaited]).toEqual(['submitted', [expect.objectContaining({ name: 'Ann Moss' }), expect.objectContaining({ name: 'Ben Moss' })] as unknown]);
  });

  it('wait for a homeowner who is invited and has not joined, where all must approve', async () => {
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id: v7(), email: 'third@people.example', name: 'Cleo Moss', role: 'homeowner' }));
    await approve(lent, lent.ann, id);
    expect(await approve(lent, lent.ben, id)).toMatchObject({ state: 'submitted', awaited: [], invitedHomeowners: 1 });
  });

  it('end in one approval when two servers take the same click, and both homeowners at once', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    const { id, effectHash } = await sentDraw(lent);
    const key = randomUUID();
    const input = { id: v7(), effectHash };
    const click = await Promise.all([url, second, url, second].map((at) => lent.ann.at(at).post(drawAt(lent, id, 'approvals'), input, key)));
    expect(click.map(({ status }) => status)).toEqual([201, 201, 201, 201]);
    const both = await Promise.all([lent.ann.at(second).post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash }), lent.ben.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash }), lent.ben.at(second).post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash })]);
    expect(both.map(({ status }) => status).sort()).toEqual([201, 409, 409]);
    expect(await get(lent.ann, id)).toMatchObject({ state: 'approved' });
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 12_573_000 });
    expect(await house.sql(`select 1 from ledger_entry where job_id = $1 and cause = 'draw'`, [lent.job.id])).toHaveLength(1);
  });

  it('ask for presence, and are nobody else\'s to approve', async () => {
    await prove(lent, 'Foundation');
    const { id, effectHash } = await sentDraw(lent);
    for (const who of [lent.principal, lent.lender]) expect((await who.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash })).status).toBe(403);
    await house.sql(`update session set present_at = now() - interval '11 minutes' where person_id = (select id from person where email = $1)`, [lent.ann.email]);
    const absent = await lent.ann.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash });
    expect([absent.status, code(absent)]).toEqual([403, 'presence_needed']);
    const { principal: stranger } = await principalWithFirm(house, url);
    for (const at of [`/jobs/${lent.job.id}/draws`, drawAt(lent, id), `/jobs/${lent.job.id}/money`, `/jobs/${lent.job.id}/loan`]) expect([at, (await stranger.get(at)).status]).toEqual([at, 404]);
    expect((await stranger.post(drawAt(lent, id, 'void'), { reason: 'Mine now.' })).status).toBe(404);
  });

  it('are void only before approval, and never change after it, whatever the hand', async () => {
    const draw = await approvedDraw(lent);
    const late = await lent.principal.post(drawAt(lent, draw.id, 'void'), { reason: 'A mistake.' });
    expect([late.status, code(late)]).toEqual([409, 'wrong_state']);
    expect((await lent.principal.post(drawAt(lent, draw.id, 'lines'), { version: draw.version, lines: [] })).status).toBe(409);
    expect((await lent.ann.post(drawAt(lent, draw.id, 'objections'), { id: v7(), lineId: lent.line['1'], objectedCents: 1, reason: 'Too late.' })).status).toBe(409);
    for (const statement of [
      `update draw set due_cents = due_cents + 1, homeowner_cents = homeowner_cents + 1 where id = $1`,
      `update draw set basis = '{}' where id = $1`,
      `update draw set state = 'submitted' where id = $1`,
      `update draw_line set work_cents = 0 where draw_id = $1`,
      `delete from draw_line where draw_id = $1`,
    ]) await expect(house.sql(statement, [draw.id])).rejects.toMatchObject({ code: 'TP030' });
    const other = made<Draw>(await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: '2026-12-31' }));
    expect(made<Draw>(await lent.principal.post(drawAt(lent, other.id, 'void'), { reason: 'Started too early.' })).state).toBe('void');
    expect(made<Draw>(await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: '2026-12-31' })).number).toBe(3);
  });
});
