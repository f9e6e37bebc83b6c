import { createSecretKey } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import type { Request } from 'express';
import { PassportStrategy } from '@nestjs/passport';
import { Strategy } from 'passport-jwt';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { SessionCookies } from './cookies.ts';

interface AccessPayload {
  sid: string;
  sub: string;
}

/** Reads the access token from its cookie. It names session and person only; whether the session still lives is asked by every unit of work. */
@Injectable()
export class JwtStrategy extends PassportStrategy(Strategy) {
  constructor(@Inject(CONFIGURATION) configuration: Configuration) {
    const cookies = new SessionCookies(configuration.PUBLIC_URL);
    // as a key object: of a text the verifier would try first, each time, whether it is a public key
    const secretOrKey = createSecretKey(configuration.JWT_SECRET, 'utf8') as unknown as string;
    super({ jwtFromRequest: (request: Request) => cookies.access(request), secretOrKey, algorithms: ['HS256'] });
  }

  validate(payload: AccessPayload): Actor {
    return { sessionId: payload.sid, personId: payload.sub };
  }
}
