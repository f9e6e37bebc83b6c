import { randomUUID } from 'node:crypto';
import request, { type Response } from 'supertest';
import type { Me } from '@tallypole/shared/schemas/auth';
import type { House } from './house.ts';

/** Somebody with a browser: keeps cookies, sends the origin, signs in by the code that is mailed. */
export class Visitor {
  private cookies = new Map<string, string>();

  constructor(
    readonly house: House,
    readonly url: string,
    readonly email: string,
  ) {}

  /** The same person at another server. */
  at(url: string): Visitor {
    const other = new Visitor(this.house, url, this.email);
    other.cookies = new Map(this.cookies);
    return other;
  }

  async get(path: string): Promise<Response> {
    const answer = await request(this.url).get(`/api${path}`).set('Cookie', this.cookie());
    this.keep(answer);
    return answer;
  }

  async post(path: string, body: object = {}, key: string | null = randomUUID()): Promise<Response> {
    const sent = request(this.url).post(`/api${path}`).set('Origin', this.url).set('Cookie', this.cookie()).set('Content-Type', 'application/json');
    if (key) void sent.set('Idempotency-Key', key);
    const answer = await sent.send(JSON.stringify(body));
    this.keep(answer);
    return answer;
  }

  async signIn(): Promise<Me> {
    const before = this.house.mail.to(this.email).length;
    await this.post('/auth/codes', { email: this.email }, null);
    const code = await this.latestCode(before);
    const answer = await this.post('/auth/sessions', { email: this.email, code }, null);
    if (answer.status !== 201) throw new Error(`${this.email} could not sign in: ${answer.text}`);
    return answer.body as Me;
  }

  /** The code in the next mail after the first `before` ones. */
  async latestCode(before = 0): Promise<string> {
    for (const end = Date.now() + 15_000; Date.now() < end; await new Promise((done) => setTimeout(done, 25))) {
      const mail = this.house.mail.to(this.email).slice(before).filter((found) => /sign-in code/.test(found.subject ?? '')).at(-1);
      const code = /^\d{6}/.exec(mail?.subject ?? '')?.[0];
      if (code) return code;
    }
    throw new Error(`No code came to ${this.email}.`);
  }

  cookie(): string {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
  }

  setCookie(name: string, value: string): void {
    this.cookies.set(name, value);
  }

  private keep(answer: Response): void {
    for (const line of (answer.headers['set-cookie'] as unknown as string[] | undefined) ?? []) {
      const [pair = ''] = line.split(';');
      const [name = '', value = ''] = pair.split('=');
      if (value) this.cookies.set(name, value);
      else this.cookies.delete(name);
    }
  }
}
