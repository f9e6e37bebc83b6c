import { v7 } from 'uuid';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import type { SetLoan } from '@tallypole/shared/schemas/loans';
import type { MilestoneList } from '@tallypole/shared/schemas/milestones';
import { createJob, join, principalWithFirm } from './builders.ts';
import type { House } from './house.ts';
import { jpeg } from './photos.ts';
import { smallSchedule } from './schedule-builders.ts';
import { upload } from './uploads.ts';
import type { Visitor } from './visitor.ts';

export interface LentJob {
  house: House;
  principal: Visitor;
  firmId: string;
  job: Job;
  ann: Visitor;
  ben: Visitor;
  lender: Visitor;
  milestoneId: Record<'Foundation' | 'Framing' | 'Finish', string>;
  /** Lines by their number, 1 to 6. */
  line: Record<string, string>;
}

export const loanInput = (more: Partial<SetLoan> = {}): SetLoan => ({
  id: v7(),
  lenderName: 'Fallbrook Bank',
  amountCents: 32_000_000,
  constructionCents: 30_000_000,
  equityFirstCents: 3_000_000,
  holdbackRate: 0,
  consentLimitCents: 500_000,
  shortfall: 'homeowner',
  route: 'builder',
  ...more,
});

/** 400,000.00 with 5 % retainage and a deposit of 20,000.00, two homeowners who must both approve, a lender with its loan. */
export async function lentJob(house: House, url: string, more: { loan?: Partial<SetLoan> | null; firm?: { principal: Visitor; firmId: string } } = {}): Promise<LentJob> {
  // many people sign in from one address in these tests; the limit on codes has a test of its own
  await house.sql('delete from rate_limit');
  const { principal, firmId } = more.firm ?? (await principalWithFirm(house, url));
  const job = await createJob(principal, firmId, { retainageRate: 500, depositCents: 2_000_000, paymentDays: 10, reviewDays: 5 });
  const { schedule, milestoneId } = await smallSchedule(principal, job.id);
  const [ann, ben, lender] = [await join(principal, job.id, 'homeowner', 'Ann Moss'), await join(principal, job.id, 'homeowner', 'Ben Moss'), await join(principal, job.id, 'lender', 'Lee Banks')];
  if (more.loan !== null) made(await principal.post(`/jobs/${job.id}/loan`, loanInput(more.loan)));
  const line = Object.fromEntries(schedule.lines.map(({ number, id }) => [number, id]));
  return { house, principal, firmId, job, ann, ben, lender, milestoneId, line };
}

interface Answer {
  status: number;
  text: string;
  body: unknown;
}

/** The body of an answer that must be a success. */
export function made<T = unknown>(answer: Answer): T {
  if (answer.status !== 201 && answer.status !== 200) throw new Error(`${answer.status} ${answer.text}`);
  return answer.body as T;
}

export async function payDeposit({ principal, job }: LentJob, amountCents = 2_000_000): Promise<void> {
  made(await principal.post(`/jobs/${job.id}/payments`, { id: v7(), drawId: null, method: 'check', source: 'homeowner', amountCents, receivedOn: '2026-09-10', reference: 'Check 1001' }));
}

/** Photographed and claimed by the firm, confirmed by the lender. Gives back the photo's id. */
export async function prove({ principal, lender, job, milestoneId }: LentJob, name: keyof LentJob['milestoneId']): Promise<string> {
  const id = milestoneId[name];
  const photoId = v7();
  const at = `/jobs/${job.id}/milestones/${id}`;
  made(await upload(principal, `/jobs/${job.id}/photos`, { id: photoId, milestoneId: id }, { name: 'IMG_1.jpg', content: await jpeg({ width: 320, height: 240 }) }));
  const version = async () => (made<MilestoneList>(await principal.get(`/jobs/${job.id}/milestones`)).items.find((milestone) => milestone.id === id)?.version ?? 0);
  made(await principal.post(`${at}/claim`, { version: await version(), note: 'Done.' }));
  made(await lender.post(`${at}/inspections`, { id: v7(), version: await version(), result: 'passed', seenOn: '2026-11-20' }));
  return photoId;
}

export const drawAt = ({ job }: LentJob, drawId: string, act = ''): string => `/jobs/${job.id}/draws/${drawId}${act && `/${act}`}`;

/** Drafted from what is proven, adjusted and sent: 139,700.00 billed, of which 125,730.00 is due. */
export async function sentDraw(lent: LentJob): Promise<Draw> {
  const { principal, job, line } = lent;
  const id = v7();
  const draft = made<Draw>(await principal.post(`/jobs/${job.id}/draws`, { id, throughOn: '2026-11-30' }));
  const lines = [
    { lineId: line['6'], workRate: 2_500 },
    { lineId: line['3'], workRate: 3_500, onHandCents: 420_000 },
  ];
  const adjusted = made<Draw>(await principal.post(drawAt(lent, id, 'lines'), { version: draft.version, lines }));
  return made<Draw>(await principal.post(drawAt(lent, id, 'submit'), { version: adjusted.version }));
}

export async function approve(lent: LentJob, who: Visitor, drawId: string): Promise<Draw> {
  const { effectHash } = made<Draw>(await who.get(drawAt(lent, drawId)));
  return made<Draw>(await who.post(drawAt(lent, drawId, 'approvals'), { id: v7(), effectHash }));
}

/** A draw that both homeowners approved: 30,000.00 for them to pay, 95,730.00 for the loan. */
export async function approvedDraw(lent: LentJob): Promise<Draw> {
  await payDeposit(lent);
  await prove(lent, 'Foundation');
  const { id } = await sentDraw(lent);
  await approve(lent, lent.ann, id);
  return await approve(lent, lent.ben, id);
}

/** What must hold of a job's ledger, whatever happened: it balances, and what is owed is what was approved less what was paid. */
export async function ledgerState(house: House, jobId: string): Promise<{ sum: number; owed: number; byDraws: number; accounts: Record<string, number> }> {
  const [totals] = await house.sql<{ sum: number; owed: number }>(
    `select coalesce(sum(amount_cents), 0)::bigint::float8 as sum,
       coalesce(sum(amount_cents) filter (where account in ('homeowner_receivable', 'customer_credit')), 0)::bigint::float8 as owed from ledger_line where job_id = $1`,
    [jobId],
  );
  const [draws] = await house.sql<{ owed: number }>(
    `select (coalesce((select sum(due_cents) from draw where job_id = $1 and approved_at is not null), 0)
       - coalesce((select sum(kept_cents) from payment where job_id = $1 and draw_id is not null), 0))::float8 as owed`,
    [jobId],
  );
  const accounts = await house.sql<{ name: string; cents: number }>(
    `select account || coalesce('/' || source, '') as name, sum(amount_cents)::float8 as cents from ledger_line where job_id = $1 group by 1 order by 1`,
    [jobId],
  );
  return { sum: totals?.sum ?? 0, owed: totals?.owed ?? 0, byDraws: draws?.owed ?? 0, accounts: Object.fromEntries(accounts.map(({ name, cents }) => [name, cents])) };
}
