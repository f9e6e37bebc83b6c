import { Inject, Injectable, createParamDecorator, type CanActivate, type ExecutionContext } from '@nestjs/common';
import type { Request } from 'express';
import { tokenHash } from './guest-tokens.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { GuestCookie } from './guest-cookie.ts';

type GuestRequest = Request & { visit?: Buffer };

/** Lets through whoever brings the cookie of a visit. Whether the visit still lasts is asked by every unit of work. */
@Injectable()
export class GuestGuard implements CanActivate {
  private readonly cookie: GuestCookie;

  constructor(@Inject(CONFIGURATION) configuration: Configuration) {
    this.cookie = new GuestCookie(configuration.PUBLIC_URL);
  }

  canActivate(context: ExecutionContext): boolean {
    const request = context.switchToHttp().getRequest<GuestRequest>();
    const token = this.cookie.read(request);
    if (!token) throw new Problem('visit_over');
    request.visit = tokenHash(token);
    return true;
  }
}

/** The hash of the visit's token, as the guard read it. */
export const Visit = createParamDecorator((_: unknown, context: ExecutionContext): Buffer => {
  const { visit } = context.switchToHttp().getRequest<GuestRequest>();
  if (!visit) throw new Problem('visit_over');
  return visit;
});
