import type { CookieOptions, Request, Response } from 'express';

const ACCESS_MINUTES = 10;
const REFRESH_DAYS = 30;
const WAIT_MINUTES = 10;

export interface SessionTokens {
  access: string;
  refresh?: string;
}

/** Names and flags follow the public address's scheme: __Host- and Secure need https. */
export class SessionCookies {
  private readonly secure: boolean;

  constructor(publicUrl: string) {
    this.secure = publicUrl.startsWith('https://');
  }

  get accessName(): string {
    return this.secure ? '__Host-tally' : 'tally';
  }

  get refreshName(): string {
    return this.secure ? '__Host-tally-refresh' : 'tally-refresh';
  }

  private get waitingName(): string {
    return this.secure ? '__Host-tally-waiting' : 'tally-waiting';
  }

  set(response: Response, tokens: SessionTokens): void {
    response.cookie(this.accessName, tokens.access, this.options(ACCESS_MINUTES * 60_000));
    if (tokens.refresh) response.cookie(this.refreshName, tokens.refresh, this.options(REFRESH_DAYS * 86_400_000));
  }

  /** The first step was right; the second one is waited for, in this browser. */
  wait(response: Response, token: string): void {
    response.cookie(this.waitingName, token, this.options(WAIT_MINUTES * 60_000));
  }

  waitOver(response: Response): void {
    response.clearCookie(this.waitingName, this.options());
  }

  waiting(request: Request): string | null {
    return readCookie(request, this.waitingName);
  }

  clear(response: Response): void {
    response.clearCookie(this.accessName, this.options());
    response.clearCookie(this.refreshName, this.options());
  }

  access(request: Request): string | null {
    return readCookie(request, this.accessName);
  }

  refresh(request: Request): string | null {
    return readCookie(request, this.refreshName);
  }

  private options(maxAge?: number): CookieOptions {
    return { httpOnly: true, sameSite: 'strict', secure: this.secure, path: '/', ...(maxAge === undefined ? {} : { maxAge }) };
  }
}

function readCookie(request: Request, name: string): string | null {
  for (const part of (request.headers.cookie ?? '').split(';')) {
    const [key, value] = part.split('=', 2);
    if (key?.trim() === name && value) return value.trim();
  }
  return null;
}
