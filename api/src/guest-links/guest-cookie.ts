import type { CookieOptions, Request, Response } from 'express';

/** The cookie of a visit by a link, beside the one of a session: whoever has an account may follow a link too. */
export class GuestCookie {
  private readonly secure: boolean;

  constructor(publicUrl: string) {
    this.secure = publicUrl.startsWith('https://');
  }

  get name(): string {
    return this.secure ? '__Host-tally-guest' : 'tally-guest';
  }

  /** It goes with the browser; the server ends the visit well before. */
  set(response: Response, token: string): void {
    response.cookie(this.name, token, this.options());
  }

  clear(response: Response): void {
    response.clearCookie(this.name, this.options());
  }

  read(request: Request): string | null {
    for (const part of (request.headers.cookie ?? '').split(';')) {
      const [name, value] = part.split('=', 2);
      if (name?.trim() === this.name && value) return value.trim();
    }
    return null;
  }

  private options(): CookieOptions {
    return { httpOnly: true, sameSite: 'strict', secure: this.secure, path: '/' };
  }
}
