import { Injectable, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import { AuthGuard } from '@nestjs/passport';
import { Problem } from '../common/problem.ts';
import { ACCESS, type RouteAccess } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';

/** Everybody must be signed in unless the route says `public`, or `guest`, which has a guard of its own. A route that declares nothing is refused to all. */
@Injectable()
export class JwtGuard extends AuthGuard('jwt') {
  constructor(private readonly reflector: Reflector) {
    super();
  }

  override canActivate(context: ExecutionContext) {
    const access = this.reflector.get<RouteAccess | undefined>(ACCESS, context.getHandler());
    if (access === undefined) throw new Problem('not_found');
    return access === 'public' || access === 'guest' ? true : super.canActivate(context);
  }

  override handleRequest<T = Actor>(error: unknown, actor: T | false): T {
    if (error || !actor) throw new Problem('not_signed_in');
    return actor;
  }
}
