import { simpleParser, type ParsedMail } from 'mailparser';
import { SMTPServer } from 'smtp-server';

/** A real SMTP server on loopback that keeps what it receives. */
export class MailSink {
  readonly mails: ParsedMail[] = [];
  /** Refuses every mail while set, as a server that is down for maintenance would. */
  refusing = false;
  private server = this.make();
  port = 0;

  private make(): SMTPServer {
    const server = new SMTPServer({
      disabledCommands: ['AUTH', 'STARTTLS'],
      onData: (stream, _session, done) => {
        if (this.refusing) {
          stream.resume();
          stream.on('end', () => done(Object.assign(new Error('Not now.'), { responseCode: 451 })));
          return;
        }
        simpleParser(stream).then((mail) => {
          this.mails.push(mail);
          done();
        }, done);
      },
    });
    // a worker that a test kills leaves its connection half-way
    server.on('error', () => undefined);
    return server;
  }

  async start(): Promise<void> {
    await new Promise<void>((listening) => this.server.listen(this.port, '127.0.0.1', listening));
    const address = this.server.server.address();
    this.port = typeof address === 'object' && address ? address.port : 0;
  }

  /** Comes back on its port after a stop; what it got before is kept. */
  async startAgain(): Promise<void> {
    this.server = this.make();
    await this.start();
  }

  to(address: string): ParsedMail[] {
    return this.mails.filter((mail) => [mail.to].flat().some((to) => to?.value.some((value) => value.address === address)));
  }

  /** Waits for a mail to an address whose subject matches. */
  async wait(address: string, subject: RegExp, milliseconds = 15_000): Promise<ParsedMail> {
    for (const until = Date.now() + milliseconds; ; await new Promise((done) => setTimeout(done, 25))) {
      const mail = this.to(address).find((found) => subject.test(found.subject ?? ''));
      if (mail) return mail;
      if (Date.now() > until) throw new Error(`No mail to ${address} like ${subject}; there are: ${this.mails.map((found) => found.subject).join(' | ')}`);
    }
  }

  async stop(): Promise<void> {
    await new Promise<void>((closed) => this.server.close(closed));
  }
}
