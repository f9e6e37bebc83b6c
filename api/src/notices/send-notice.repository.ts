import { buffer } from 'node:stream/consumers';
import type { Tx, UnitOfWork } from '../common/unit-of-work.ts';
import { Problem } from '../common/problem.ts';
import type { FileStorage } from '../files/file-storage.ts';
import type { Mailer } from './mailer.ts';
import { renderMail, type NoticeKind } from './templates.ts';

interface NoticeRow {
  id: string;
  kind: NoticeKind;
  person_id: string | null;
  to_email: string | null;
  to_name: string | null;
  data: Record<string, unknown>;
  firm_name: string;
  sent_at: Date | null;
}

export interface NoticeJob {
  noticeId: string;
  firmId: string;
}

export interface SendSettings {
  publicUrl: string;
  storage: FileStorage;
}

/** Worker: mails one notice of the outbox. It is marked as sent after the mail server took it; a crash in between may send it again, under the same Message-ID. */
export async function sendNotice(work: UnitOfWork, mailer: Mailer, { publicUrl, storage }: SendSettings, job: NoticeJob): Promise<void> {
  const found = await work.writeAsFirm(job.firmId, (tx) => load(tx, job.noticeId));
  if (!found || found.notice.sent_at !== null) return;
  // whoever it was meant for has left, and nobody takes their place: it is done, so that its text goes when its time is over
  if (!found.to) return await settle(work, job);
  const { notice, to, paper } = found;
  const attachments = paper ? [{ filename: paper.name, content: await buffer(await storage.get(paper.storage_key)) }] : undefined;
  await mailer.send(renderMail(notice.kind, { ...notice.data, sender: notice.firm_name, name: notice.data['name'] ?? to.name, email: notice.data['email'] ?? to.address }), {
    to,
    senderName: notice.firm_name,
    messageId: `<${notice.id}@${new URL(publicUrl).hostname}>`,
    reason: notice.kind,
    ...(attachments ? { attachments } : {}),
    ...replyTo(notice.data),
  });
  await settle(work, job);
}

async function settle(work: UnitOfWork, job: NoticeJob): Promise<void> {
  await work.writeAsFirm(job.firmId, (tx) => tx.rows('update notice set sent_at = now() where id = $1 and sent_at is null', [job.noticeId]));
}

async function load(tx: Tx, noticeId: string) {
  const notice = await tx.one<NoticeRow>('select n.*, f.name as firm_name from notice n join firm f on f.id = n.firm_id where n.id = $1', [noticeId]);
  // the job may run before a read replica or a rolled-back act: an absent row is tried again by the queue
  if (!notice) throw new Problem('not_found');
  const paper = await tx.one<{ name: string; storage_key: string }>('select name, storage_key from document where id = $1', [notice.data['documentId'] ?? null]);
  if (notice.to_email !== null) return { notice, paper, to: { name: notice.to_name ?? '', address: notice.to_email } };
  const person = await tx.one<{ email: string; name: string | null }>('select email, name from app.notice_receiver($1)', [noticeId]);
  return { notice, paper, to: person ? { name: person.name ?? '', address: person.email } : undefined };
}

function replyTo(data: Record<string, unknown>): { replyTo?: { name: string; address: string } } {
  const { replyToName, replyToEmail } = data;
  return typeof replyToEmail === 'string' ? { replyTo: { name: typeof replyToName === 'string' ? replyToName : '', address: replyToEmail } } : {};
}
