import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Lending } from '@tallypole/shared/schemas/lending';
import type { JobLoan } from '@tallypole/shared/schemas/loans';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { principalWithFirm } from './support/builders.ts';
import { approve, approvedDraw, drawAt, ledgerState, lentJob, loanInput, made, prove, sentDraw, type LentJob } from './support/draw-builders.ts';
import { House } from './support/house.ts';
import type { Visitor } from './support/visitor.ts';

describe('the lender', () => {
  let house: House;
  let url: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    firm = await principalWithFirm(house, url);
  });
  afterAll(() => house.close());
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
  });

  const code = (answer: { body: unknown }) => (answer.body as { code: string }).code;
  const queue = async (who: Visitor = lent.lender) => made<Lending>(await who.get('/lending')).items;
  const blocker = async () => (await queue())[0]?.blocker;
  const review = (drawId: string, step: string, body: object) => lent.lender.post(drawAt(lent, drawId, `review/${step}`), { id: v7(), ...body });
  const inspect = async (drawId: string) => made<Draw>(await review(drawId, 'inspections', { onDate: '2026-11-30', note: 'Walked the site.' }));
  const allow = async (drawId: string, lines: object[] = [], conditions = '') => made<Draw>(await review(drawId, 'allowances', { onDate: '2026-11-30', note: '', conditions, lines }));
  const fund = (drawId: string, amountCents: number, reference = 'FED 2211') => review(drawId, 'fundings', { amountCents, fundedOn: '2026-11-30', reference });

  it('enters the loan until a draw was approved on it; wrong terms are refused at their field', async () => {
    const wrong = await lent.lender.post(`/jobs/${lent.job.id}/loan`, loanInput({ constructionCents: 33_000_000 }));
    expect([wrong.status, (wrong.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([400, '/constructionCents']);
    expect(made<JobLoan>(await lent.lender.post(`/jobs/${lent.job.id}/loan`, loanInput({ equityFirstCents: 2_000_000 }))).loan).toMatchObject({ equityFirstCents: 2_000_000, version: 2, disbursedCents: 0 });
    expect((await lent.ann.post(`/jobs/${lent.job.id}/loan`, loanInput())).status).toBe(403);
    await approvedDraw(lent);
    expect((await lent.principal.post(`/jobs/${lent.job.id}/loan`, loanInput())).status).toBe(409);
    expect(made<JobLoan>(await lent.ann.get(`/jobs/${lent.job.id}/loan`)).loan?.lenderName).toBe('Fallbrook Bank');
  });

  it('sees for each draw the one thing that blocks it, and funds when nothing does', async () => {
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    // floor joists are billed at 35 % and nobody has seen them
    expect(await queue()).toEqual([expect.objectContaining({ number: 1, blocker: 'unproven', provenCents: 10_750_000, billedCents: 13_550_000, approvals: { given: 0, needed: 2 } }) as unknown]);
    expect(code(await fund(id, 1))).toBe('wrong_state');
    expect(code(await review(id, 'allowances', { onDate: '2026-11-30', note: '', conditions: '', lines: [] }))).toBe('wrong_state');
    await inspect(id);
    expect(await blocker()).toBe('not_allowed');
    await allow(id, [], 'Title date-down.');
    expect(await blocker()).toBe('not_approved');
    await approve(lent, lent.ann, id);
    const done = await approve(lent, lent.ben, id);
    expect(await blocker()).toBe('conditions');
    await allow(id);
    expect(await blocker()).toBeNull();
    const more = await fund(id, done.loanCents + 1);
    expect([more.status, (more.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([400, '/amountCents']);
    const part = made<Draw>(await fund(id, 1_000_000));
    expect([part.state, part.reviewState, part.openLoanCents]).toEqual(['part_paid', 'allowed', done.loanCents - 1_000_000]);
    const rest = made<Draw>(await fund(id, done.loanCents - 1_000_000, 'FED 2212'));
    expect([rest.state, rest.reviewState, rest.openLoanCents, rest.openHomeownerCents]).toEqual(['part_paid', 'funded', 0, 3_000_000]);
    expect(rest.fundings.map(({ amountCents, reference, by, received }) => [amountCents, reference, by, received])).toEqual([[1_000_000, 'FED 2211', 'Lee Banks', true], [done.loanCents - 1_000_000, 'FED 2212', 'Lee Banks', true]]);
    expect(await queue()).toEqual([]);
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 3_000_000, byDraws: 3_000_000, accounts: { bank: done.loanCents, 'homeowner_receivable/homeowner': 3_000_000, 'homeowner_receivable/loan': 0 } });
    const mail = await house.mail.wait(lent.principal.email, /: the bank sent \$10,000\.00$/);
    expect(mail.text).toContain('Sent to the builder. Reference: FED 2211');
    await house.mail.wait(lent.ann.email, /^Receipt: \$10,000\.00 for Draw 1, 9 Larkspur Court$/);
  });

  it('allows less on a line before the approval: the split that is approved is the one that was shown', async () => {
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    const before = made<Draw>(await lent.ann.get(drawAt(lent, id)));
    await inspect(id);
    // by hand: nothing allowed on the floor joists takes 30,590.00 net off the 132,715.00 that the loan could bear, 590.00 more than the equity covers
    const allowed = await allow(id, [{ lineId: lent.line['3'], percent: 0, reason: 'No hangers yet.' }]);
    expect([allowed.dueCents, allowed.homeownerCents, allowed.loanCents]).toEqual([before.dueCents, 3_059_000, 10_212_500]);
    expect(code(await lent.ann.post(drawAt(lent, id, 'approvals'), { id: v7(), effectHash: before.effectHash }))).toBe('effect_changed');
    await approve(lent, lent.ann, id);
    expect(await approve(lent, lent.ben, id)).toMatchObject({ state: 'approved', homeownerCents: allowed.homeownerCents, loanCents: allowed.loanCents });
  });

  it('allows less after the approval: what is owed stays, who pays it moves, in the ledger and by mail', async () => {
    const draw = await approvedDraw(lent);
    await inspect(draw.id);
    const moved = await allow(draw.id, [{ lineId: lent.line['1'], percent: 0, reason: 'No proof.' }]);
    expect([moved.dueCents, moved.homeownerCents + moved.loanCents]).toEqual([draw.dueCents, draw.dueCents]);
    expect(moved.loanCents).toBeLessThan(draw.loanCents);
    expect(moved.effectHash).toBe(draw.effectHash);
    const { sum, owed, accounts } = await ledgerState(house, lent.job.id);
    expect([sum, owed, accounts['homeowner_receivable/homeowner'], accounts['homeowner_receivable/loan']]).toEqual([0, draw.dueCents, moved.homeownerCents, moved.loanCents]);
    await house.mail.wait(lent.ann.email, /^Draw 1, 9 Larkspur Court: you pay \$/);
    // and back again
    expect(await allow(draw.id)).toMatchObject({ homeownerCents: draw.homeownerCents, loanCents: draw.loanCents });
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, accounts: { 'homeowner_receivable/homeowner': draw.homeownerCents, 'homeowner_receivable/loan': draw.loanCents } });
  });

  it('sends money by way of the title company: it counts when the builder has it', async () => {
    const other = await lentJob(house, url, { firm, loan: { route: 'title_company' } });
    const draw = await approvedDraw(other);
    lent = other;
    await inspect(draw.id);
    await allow(draw.id);
    const funded = made<Draw>(await fund(draw.id, draw.loanCents));
    expect([funded.state, funded.reviewState, funded.paidLoanCents, funded.fundings[0]?.received]).toEqual(['approved', 'funded', 0, false]);
    const paymentId = funded.payments[0]?.id ?? '';
    expect(funded.payments[0]).toMatchObject({ state: 'processing', method: 'loan_advance', source: 'loan' });
    const receipt = () => other.principal.post(`/jobs/${other.job.id}/payments/${paymentId}/receipt`, { receivedOn: '2026-12-01' });
    expect((await other.lender.post(`/jobs/${other.job.id}/payments/${paymentId}/receipt`, { receivedOn: '2026-12-01' })).status).toBe(403);
    made(await receipt());
    expect(code(await receipt())).toBe('wrong_state');
    expect(made<Draw>(await other.lender.get(drawAt(other, draw.id)))).toMatchObject({ state: 'part_paid', paidLoanCents: draw.loanCents, fundings: [{ received: true }] });
    expect(await ledgerState(house, other.job.id)).toMatchObject({ sum: 0, owed: 3_000_000, byDraws: 3_000_000 });
  });

  it('is a stranger elsewhere: nothing in the queue, nothing to fund; and never sees what processing costs', async () => {
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    const other = await lentJob(house, url, { firm });
    expect(await queue(other.lender)).toEqual([]);
    expect((await other.lender.post(drawAt(lent, id, 'review/inspections'), { id: v7(), onDate: '2026-11-30', note: '' })).status).toBe(404);
    expect((await lent.principal.post(drawAt(lent, id, 'review/inspections'), { id: v7(), onDate: '2026-11-30', note: '' })).status).toBe(403);
    expect(made<JobMoney>(await lent.lender.get(`/jobs/${lent.job.id}/money`)).fees).toBeNull();
    expect(made<JobMoney>(await lent.principal.get(`/jobs/${lent.job.id}/money`)).fees).not.toBeNull();
  });

  it('records a check or a wire in hand, within what is open', async () => {
    const draw = await approvedDraw(lent);
    const record = (amountCents: number, more: object = {}) => lent.principal.post(`/jobs/${lent.job.id}/payments`, { id: v7(), drawId: draw.id, method: 'check', source: 'homeowner', amountCents, receivedOn: '2026-12-01', reference: 'Check 88', ...more });
    expect((await record(3_000_001)).status).toBe(400);
    expect((await lent.ann.post(`/jobs/${lent.job.id}/payments`, {})).status).toBeGreaterThanOrEqual(400);
    made(await record(1_000_000));
    made(await record(2_000_000, { method: 'wire', reference: 'Wire 9' }));
    made(await record(draw.loanCents, { source: 'loan', method: 'wire', reference: 'Wire 10' }));
    expect(made<Draw>(await lent.ann.get(drawAt(lent, draw.id)))).toMatchObject({ state: 'paid', openHomeownerCents: 0, openLoanCents: 0 });
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 0, byDraws: 0 });
    const receipt = await house.mail.wait(lent.ben.email, /^Receipt: \$10,000\.00 for Draw 1/);
    expect(receipt.text).toContain('Still open of Draw 1: $115,730.00.');
    expect(receipt.text).toMatch(/Record entry \d+: [0-9a-f]{64}/);
  });
});
