import { v4 } from 'uuid';

/** Somebody of the demo with a session: acts over HTTP, as their browser would. */
export class Persona {
  constructor(
    private readonly url: string,
    private readonly origin: string,
    private readonly cookie: string,
  ) {}

  async get<T>(path: string): Promise<T> {
    return await this.answer<T>(await fetch(`${this.url}/api/${path}`, { headers: { cookie: this.cookie } }));
  }

  async post<T = unknown>(path: string, body: object = {}): Promise<T> {
    const headers = { cookie: this.cookie, origin: this.origin, 'content-type': 'application/json', 'idempotency-key': v4() };
    return await this.answer<T>(await fetch(`${this.url}/api/${path}`, { method: 'POST', headers, body: JSON.stringify(body) }));
  }

  async upload<T = unknown>(path: string, fields: Readonly<Record<string, string>>, file: { name: string; type: string; content: Buffer }): Promise<T> {
    const form = new FormData();
    for (const [name, value] of Object.entries(fields)) form.set(name, value);
    form.set('file', new Blob([new Uint8Array(file.content)], { type: file.type }), file.name);
    return await this.answer<T>(await fetch(`${this.url}/api/${path}`, { method: 'POST', headers: { cookie: this.cookie, origin: this.origin }, body: form }));
  }

  private async answer<T>(response: Response): Promise<T> {
    const text = await response.text();
    if (!response.ok) throw new Error(`${response.url}: ${response.status} ${text}`);
    return (text === '' ? undefined : JSON.parse(text)) as T;
  }
}
