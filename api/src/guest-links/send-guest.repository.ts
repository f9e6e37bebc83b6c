import { v7 } from 'uuid';
import { codeHash, newCode } from '../auth/tokens.ts';
import type { UnitOfWork } from '../common/unit-of-work.ts';
import { writtenDate } from '../common/written-date.ts';
import type { Mailer } from '../notices/mailer.ts';
import { renderMail } from '../notices/templates.ts';
import { listed, whoseInspector } from './guest-words.ts';
import { codeSubject, newToken, tokenHash } from './guest-tokens.ts';

export interface GuestMailSettings {
  secret: string;
  publicUrl: string;
}

interface LinkToSend {
  name: string;
  email: string;
  note: string;
  expiresAt: Date;
  onBehalf: 'lender' | 'homeowner' | 'town' | 'firm';
  firmName: string;
  jobName: string;
  timeZone: string;
  senderName: string;
  senderEmail: string;
  milestones: string[];
}

const messageId = (publicUrl: string): string => `<${v7()}@${new URL(publicUrl).hostname}>`;

/** Worker: makes the token of a link, keeps its hash and mails it. Run again it makes another one in its place, so that the latest mail is right. */
export async function sendGuestLink(work: UnitOfWork, mailer: Mailer, { publicUrl }: GuestMailSettings, job: { linkId: string; firmId: string }): Promise<void> {
  const token = newToken();
  const link = await work.writeAsFirm(job.firmId, async (tx) => {
    const found = await tx.one<LinkToSend>(LINK, [job.linkId]);
    if (found) await tx.rows('update guest_link set token_hash = $2 where id = $1', [job.linkId, tokenHash(token)]);
    return found;
  });
  // mailed, revoked or used in the meantime
  if (!link) return;
  const { name, email, firmName, senderName, senderEmail, milestones, expiresAt, timeZone, onBehalf, ...facts } = link;
  const expires = writtenDate(expiresAt, timeZone);
  const data = { ...facts, name, firmName, senderName, milestones: listed(milestones), whose: whoseInspector[onBehalf], expires, url: `${publicUrl}/guest#${token}`, sender: firmName };
  await mailer.send(renderMail('guest-link', data), {
    to: { name, address: email },
    replyTo: { name: senderName, address: senderEmail },
    senderName: firmName,
    messageId: messageId(publicUrl),
    reason: 'guest-link',
  });
  await work.writeAsFirm(job.firmId, (tx) => tx.rows('update guest_link set mailed_at = now() where id = $1 and token_hash = $2', [job.linkId, tokenHash(token)]));
}

/** Worker: makes the code of a visit, keeps its HMAC and mails it. */
export async function sendGuestCode(work: UnitOfWork, mailer: Mailer, { secret, publicUrl }: GuestMailSettings, codeId: string): Promise<void> {
  const code = newCode();
  const to = await work.write(undefined, async (tx) => {
    const found = await tx.one<{ email: string; name: string; sessionId: string; firmName: string }>(
      `select email, name, session_id as "sessionId", firm_name as "firmName" from app.guest_code_address($1, now())`,
      [codeId],
    );
    if (found) await tx.rows('select app.set_guest_code($1, $2, now())', [codeId, codeHash(secret, codeSubject(found.sessionId), code)]);
    return found;
  });
  if (!to) return;
  await mailer.send(renderMail('guest-code', { code, firmName: to.firmName, sender: to.firmName }), {
    to: { name: to.name, address: to.email },
    senderName: to.firmName,
    messageId: messageId(publicUrl),
    reason: 'guest-code',
  });
}

/** Worker, daily: visits that are long over, and their codes. */
export async function sweepGuests(work: UnitOfWork): Promise<void> {
  await work.write(undefined, (tx) => tx.rows('select app.sweep_guests(now())'));
}

const LINK = /* sql */ `
  select l.name, l.email, l.note, l.expires_at as "expiresAt", b.on_behalf as "onBehalf", f.name as "firmName", j.name as "jobName", j.time_zone as "timeZone",
    coalesce(s.name, s.email) as "senderName", s.email as "senderEmail",
    (select json_agg(m.name order by m.position) from guest_link_milestone g join milestone m on m.id = g.milestone_id where g.link_id = l.id and g.answered_at is null) as milestones
  from guest_link l join guest_link_inspector b on b.link_id = l.id join job j on j.id = l.job_id join firm f on f.id = l.firm_id join person s on s.id = l.sent_by
  where l.id = $1 and l.mailed_at is null and l.revoked_at is null and l.done_at is null and l.expires_at > now()
  for update of l`;
