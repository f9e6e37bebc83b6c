import { createTransport, type Transporter } from 'nodemailer';
import type { Mail } from './templates.ts';

export interface Envelope {
  to: { name: string; address: string };
  replyTo?: { name: string; address: string };
  senderName: string;
  /** Stable for one notice, so that a mail sent twice at a crash is recognized as one. */
  messageId: string;
  reason: string;
  attachments?: readonly { filename: string; content: Buffer }[];
}

/** The only door to SMTP. */
export class Mailer {
  private readonly transport: Transporter;

  constructor(
    smtpUrl: string,
    private readonly from: string,
  ) {
    this.transport = createTransport(smtpUrl, { pool: true, maxConnections: 5, connectionTimeout: 10_000, socketTimeout: 20_000 } as object);
  }

  async send(mail: Mail, envelope: Envelope): Promise<void> {
    await this.transport.sendMail({
      // addresses as objects: a name can't smuggle a second receiver
      from: { name: envelope.senderName, address: this.from },
      to: envelope.to,
      ...(envelope.replyTo ? { replyTo: envelope.replyTo } : {}),
      subject: mail.subject,
      text: mail.text,
      html: mail.html,
      ...(envelope.attachments ? { attachments: envelope.attachments.map((file) => ({ ...file, contentType: 'application/pdf' })) } : {}),
      messageId: envelope.messageId,
      headers: { 'X-Tallypole-Reason': envelope.reason, 'Auto-Submitted': 'auto-generated' },
    });
  }

  close(): void {
    this.transport.close();
  }
}
