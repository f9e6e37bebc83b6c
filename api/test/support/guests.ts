import { v7 } from 'uuid';
import type { GuestVisit, InspectorFor, SendInspectorLink } from '@tallypole/shared/schemas/guest-links';
import type { House } from './house.ts';
import { Visitor } from './visitor.ts';

let count = 0;

export interface Asked {
  milestoneIds: string[];
  onBehalf: InspectorFor;
  name?: string;
  email?: string;
  note?: string;
  days?: number;
}

/** The body that sends a link; the address is a new one unless given. */
export function linkInput({ milestoneIds, onBehalf, name = 'Jo Marsh', email, note = '', days = 14 }: Asked): SendInspectorLink {
  count += 1;
  return { id: v7(), name, email: email ?? `inspector${count}@marsh${count}.example`, onBehalf, milestoneIds, note, days };
}

/** Somebody without an account, at a browser of their own. */
export class GuestVisitor extends Visitor {
  constructor(house: House, url: string, email: string) {
    super(house, url, email);
  }

  /** The token in the link of the newest mail after the first `before` ones. */
  async token(before = 0): Promise<string> {
    for (const end = Date.now() + 15_000; Date.now() < end; await new Promise((done) => setTimeout(done, 25))) {
      const mails = this.house.mail.to(this.email).filter((mail) => /^Please look at /.test(mail.subject ?? ''));
      const token = /\/guest#([A-Za-z0-9_-]{43})\b/.exec(mails.slice(before).at(-1)?.text ?? '')?.[1];
      if (token) return token;
    }
    throw new Error(`No link came to ${this.email}.`);
  }

  async guestCode(before = 0): Promise<string> {
    for (const end = Date.now() + 15_000; Date.now() < end; await new Promise((done) => setTimeout(done, 25))) {
      const mails = this.house.mail.to(this.email).filter((mail) => / is your code for /.test(mail.subject ?? ''));
      const code = /^\d{6}/.exec(mails.slice(before).at(-1)?.subject ?? '')?.[0];
      if (code) return code;
    }
    throw new Error(`No code came to ${this.email}.`);
  }

  codesSoFar = (): number => this.house.mail.to(this.email).filter((mail) => / is your code for /.test(mail.subject ?? '')).length;

  /** Opens the link, asks for the code and enters it. */
  async enter(token?: string): Promise<GuestVisit> {
    const opened = await this.post('/guest/visits', { token: token ?? (await this.token()) }, null);
    if (opened.status !== 201) throw new Error(opened.text);
    await this.confirm();
    return (await this.get('/guest/visit')).body as GuestVisit;
  }

  /** Proves the address anew by a fresh code. */
  async confirm(): Promise<void> {
    const before = this.codesSoFar();
    await this.post('/guest/codes', {}, null);
    const answer = await this.post('/guest/confirm', { code: await this.guestCode(before) }, null);
    if (answer.status !== 200) throw new Error(answer.text);
  }
}
