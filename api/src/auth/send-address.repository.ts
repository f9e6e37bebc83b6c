import { v7 } from 'uuid';
import type { UnitOfWork } from '../common/unit-of-work.ts';
import type { Mailer } from '../notices/mailer.ts';
import { renderMail, type NoticeKind } from '../notices/templates.ts';
import { writtenMoment } from './account-notices.ts';
import type { CodeSettings } from './send-code.repository.ts';
import { codeHash, newCode, newToken, tokenHash } from './tokens.ts';

/** What the code of an address change is bound to. */
export const addressSubject = (personId: string): string => `address:${personId}`;

const envelope = (publicUrl: string, address: string, reason: NoticeKind, id: string = v7()) => ({
  to: { name: '', address },
  senderName: 'Tallypole',
  messageId: `<${id}@${new URL(publicUrl).hostname}>`,
  reason,
});

/** Worker: makes the code for a new address and mails it there. Run again it makes another one in its place. */
export async function sendAddressCode(work: UnitOfWork, mailer: Mailer, { secret, publicUrl }: CodeSettings, changeId: string): Promise<void> {
  const code = newCode();
  const to = await work.write(undefined, async (tx) => {
    const found = await tx.one<{ email: string; person_id: string }>('select email, person_id from app.new_address($1, now())', [changeId]);
    if (found) await tx.rows('select app.set_address_code($1, $2, now())', [changeId, codeHash(secret, addressSubject(found.person_id), code)]);
    return found?.email;
  });
  if (to) await mailer.send(renderMail('address-code', { code, sender: 'Tallypole' }), envelope(publicUrl, to, 'address-code'));
}

/** Worker: tells the old address, with a token by which whoever lives there undoes it. */
export async function tellAddressChanged(work: UnitOfWork, mailer: Mailer, publicUrl: string, changeId: string): Promise<void> {
  const token = newToken();
  const change = await work.write(undefined, (tx) =>
    tx.one<{ old_email: string; new_email: string; done_at: Date; undo_until: Date }>('select * from app.address_changed($1, $2, now())', [changeId, tokenHash(token)]),
  );
  // told, or undone in the meantime
  if (!change) return;
  const data = { sender: 'Tallypole', newAddress: masked(change.new_email), at: writtenMoment(change.done_at), until: writtenMoment(change.undo_until), url: `${publicUrl}/address-undo#${token}` };
  await mailer.send(renderMail('address-changed', data), envelope(publicUrl, change.old_email, 'address-changed', changeId));
  await work.write(undefined, (tx) => tx.rows('select app.address_change_told($1, now())', [changeId]));
}

/** Worker: mails what concerns a person's own account. Sent again after a crash it keeps its Message-ID. */
export async function sendAccountNotice(work: UnitOfWork, mailer: Mailer, publicUrl: string, noticeId: string): Promise<void> {
  const notice = await work.write(undefined, (tx) => tx.one<{ kind: NoticeKind; email: string; data: Record<string, unknown> }>('select kind, email, data from app.account_notice($1)', [noticeId]));
  if (!notice) return;
  const mail = renderMail(notice.kind, { ...notice.data, sender: 'Tallypole', url: `${publicUrl}/account` });
  await mailer.send(mail, envelope(publicUrl, notice.email, notice.kind, noticeId));
  await work.write(undefined, (tx) => tx.rows('select app.account_notice_sent($1, now())', [noticeId]));
}

/** "i…@moreau.example": whoever reads the old address need not learn the whole new one. */
const masked = (email: string): string => `${email.slice(0, 1)}…${email.slice(email.indexOf('@'))}`;
