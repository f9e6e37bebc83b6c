import { v7 } from 'uuid';
import type { UnitOfWork } from '../common/unit-of-work.ts';
import type { Mailer } from '../notices/mailer.ts';
import { renderMail } from '../notices/templates.ts';
import { codeHash, newCode } from './tokens.ts';

export interface CodeSettings {
  secret: string;
  publicUrl: string;
}

/** Worker: makes a sign-in code, keeps its HMAC and mails it. Run again it makes another one in its place, so that the latest mail is right. */
export async function sendCode(work: UnitOfWork, mailer: Mailer, settings: CodeSettings, codeId: string): Promise<void> {
  const code = newCode();
  const email = await work.write(undefined, async (tx) => {
    // the hash is bound to the address, which only this function may learn
    const address = await tx.one<{ email: string | null }>('select app.code_address($1, now()) as email', [codeId]);
    if (!address?.email) return null;
    await tx.rows('select app.set_code($1, $2, now())', [codeId, codeHash(settings.secret, address.email, code)]);
    return address.email;
  });
  // used or expired in the meantime: nothing to mail
  if (email === null) return;
  await mailer.send(renderMail('sign-in-code', { code, sender: 'Tallypole' }), {
    to: { name: '', address: email },
    senderName: 'Tallypole',
    messageId: `<${v7()}@${new URL(settings.publicUrl).hostname}>`,
    reason: 'sign-in-code',
  });
}
