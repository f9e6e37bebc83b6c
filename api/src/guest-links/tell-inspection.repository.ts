import { formatRate } from '@tallypole/shared/money';
import type { InspectorFor, SenderSide } from '@tallypole/shared/schemas/guest-links';
import type { InspectionResult } from '@tallypole/shared/schemas/milestones';
import type { Tx, UnitOfWork } from '../common/unit-of-work.ts';
import type { NoticeRepository } from '../notices/notice.repository.ts';
import { whoseInspector } from './guest-words.ts';

export interface TellJob {
  inspectionId: string;
  firmId: string;
  /** Who is concerned within the firm: who claimed it and who set up the job. */
  inside: string[];
}

interface SeenFacts {
  jobId: string;
  milestoneId: string;
  jobName: string;
  milestoneName: string;
  result: InspectionResult;
  percent: number;
  note: string;
  independent: boolean;
  guestName: string;
  company: string;
  license: string;
  onBehalf: InspectorFor;
  senderSide: SenderSide;
  senderId: string;
  senderName: string;
  senderEmail: string;
}

const OUTCOMES: Readonly<Record<InspectionResult, string>> = { passed: 'is proven', partial: 'is done in part', failed: 'was not accepted' };
const SEEN: Readonly<Record<InspectionResult, string>> = { passed: 'confirms that it is done', partial: 'has seen a part of it in place', failed: 'could not confirm that it is done' };

/** Worker: mails what a guest saw to whom it concerns; where the firm sent the link, also to those outside, who rely on it. Run again it does nothing more. */
export async function tellGuestInspection(work: UnitOfWork, notices: NoticeRepository, publicUrl: string, job: TellJob): Promise<void> {
  await work.writeAsFirm(job.firmId, async (tx) => {
    const first = await tx.one('update guest_inspection set told_at = now() where inspection_id = $1 and told_at is null returning inspection_id', [job.inspectionId]);
    if (!first) return;
    const facts = await tx.one<SeenFacts>(FACTS, [job.inspectionId]);
    if (!facts) throw new Error('An inspection that is told of must be visible to its firm.');
    const outside = facts.senderSide === 'firm' ? await observers(tx, facts.jobId) : [facts.senderId];
    const data = dataOf(facts, publicUrl);
    await notices.postAll(tx, [...new Set([...job.inside, ...outside])].map((personId) => ({ firmId: job.firmId, jobId: facts.jobId, kind: 'guest-inspected' as const, to: { personId }, data })));
  });
}

async function observers(tx: Tx, jobId: string): Promise<string[]> {
  const rows = await tx.rows<{ id: string }>(`select distinct person_id as id from job_member where job_id = $1 and role in ('homeowner', 'lender') and ended_at is null`, [jobId]);
  return rows.map(({ id }) => id);
}

function dataOf(facts: SeenFacts, publicUrl: string) {
  const { jobId, milestoneId, jobName, milestoneName, result, percent, note, independent, guestName, company, license, onBehalf, senderSide, senderName, senderEmail } = facts;
  const counts = independent || result === 'failed';
  return {
    jobName, milestoneName, note, guestName, senderName,
    who: [guestName, company, license].filter((part) => part !== '').join(', '),
    whose: whoseInspector[onBehalf],
    outcome: counts ? OUTCOMES[result] : 'was looked at',
    word: SEEN[result],
    percent: formatRate(percent),
    byFirm: senderSide === 'firm',
    noProof: !counts,
    url: `${publicUrl}/jobs/${jobId}/milestones/${milestoneId}`,
    replyToName: senderName,
    replyToEmail: senderEmail,
  };
}

const FACTS = /* sql */ `
  select i.job_id as "jobId", i.milestone_id as "milestoneId", j.name as "jobName", m.name as "milestoneName", i.result, i.percent, i.note, i.independent,
    coalesce(g.name, '') as "guestName", coalesce(g.company, '') as company, coalesce(g.license, '') as license, b.on_behalf as "onBehalf", l.sender_side as "senderSide",
    l.sent_by as "senderId", coalesce(s.name, s.email) as "senderName", s.email as "senderEmail"
  from inspection i join guest_inspection g on g.inspection_id = i.id join guest_link l on l.id = g.link_id join guest_link_inspector b on b.link_id = l.id
    join job j on j.id = i.job_id join milestone m on m.id = i.milestone_id join person s on s.id = l.sent_by where i.id = $1`;
