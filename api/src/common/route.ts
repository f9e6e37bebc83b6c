import { SetMetadata, applyDecorators, createParamDecorator, type ExecutionContext } from '@nestjs/common';
import { ApiExtension, ApiHeader } from '@nestjs/swagger';
import type { Request } from 'express';
import { z } from 'zod';
import type { Permission } from '@tallypole/shared/schemas/permissions';
import { Problem } from './problem.ts';
import type { Actor } from './unit-of-work.ts';

/** `public`: anybody; `guest`: whoever came by a link, see guest-links; `signed_in`: any person, about themselves; otherwise the permission that the service checks on the resource. */
export type RouteAccess = Permission | 'public' | 'guest' | 'signed_in';
/** Named classes of limits, see rate-limit.guard.ts. */
export type RateClass = 'read' | 'write' | 'sign_in' | 'code' | 'upload' | 'webhook';

export const ACCESS = 'route:access';
export const RATE = 'route:rate';

/** Declares who may use a route and how often. Every route needs it; a test looks. */
export const Route = (access: RouteAccess, rate: RateClass) =>
  applyDecorators(SetMetadata(ACCESS, access), SetMetadata(RATE, rate), ApiExtension('x-access', access), ApiExtension('x-rate', rate));

/** Who acts, put on the request by the JWT strategy. */
export const CurrentActor = createParamDecorator((_: unknown, context: ExecutionContext): Actor => {
  const { user } = context.switchToHttp().getRequest<Request & { user?: Actor }>();
  if (!user) throw new Problem('not_signed_in');
  return user;
});

const Key = z.uuid();
const readKey = createParamDecorator((_: unknown, context: ExecutionContext): string => {
  const parsed = Key.safeParse(context.switchToHttp().getRequest<Request>().get('idempotency-key'));
  if (!parsed.success) throw new Problem('idempotency_key_missing');
  return parsed.data.toLowerCase();
});

/** The Idempotency-Key header, a UUID made when the form opened. */
export const IdempotencyKey = readKey;
export const ApiIdempotencyKey = () => ApiHeader({ name: 'Idempotency-Key', required: true, schema: { type: 'string', format: 'uuid' } });
