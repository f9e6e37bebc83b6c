import { Inject, Injectable } from '@nestjs/common';
import jwt from 'jsonwebtoken';
import { v7 } from 'uuid';
import type { CodeSent, Me, SignIn } from '@tallypole/shared/schemas/auth';
import { Clock } from '../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { InvitationAcceptance } from '../people/invitation-acceptance.ts';
import { AuthRepository } from './auth.repository.ts';
import type { SessionTokens } from './cookies.ts';
import { codeHash, newRefreshToken, refreshHash } from './tokens.ts';

const CODE_MINUTES = 10;
/** Codes that one address may ask for. */
const CODES_PER_ADDRESS = { hits: 6, seconds: 900 };

export interface SignedIn {
  actor: Actor;
  me: Me;
  tokens: SessionTokens;
}

@Injectable()
export class AuthService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: AuthRepository,
    private readonly queue: QueueRepository,
    private readonly acceptance: InvitationAcceptance,
    private readonly limits: RateLimitGuard,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  /** Asks for a code at an address. The answer is the same whether somebody lives there or not. */
  async askForCode(email: string): Promise<CodeSent> {
    await this.limits.take(`code:${email}`, CODES_PER_ADDRESS);
    const now = this.clock.now();
    await this.work.write(undefined, (tx) => this.sendCode(tx, email, now));
    return { sentTo: email, expiresAt: new Date(now.getTime() + CODE_MINUTES * 60_000).toISOString() };
  }

  /** The same for somebody who is signed in and must show that it is still them. */
  async askForPresenceCode(actor: Actor): Promise<CodeSent> {
    const email = await this.work.write(actor, (tx) => this.repository.email(tx));
    return await this.askForCode(email);
  }

  async signIn(input: SignIn, userAgent: string): Promise<SignedIn> {
    const now = this.clock.now();
    const refresh = newRefreshToken();
    const sessionId = v7();
    const attempt = { email: input.email, codeHash: this.hash(input.email, input.code), personId: v7(), sessionId, refreshHash: refreshHash(refresh), userAgent, now };
    // a wrong code is committed, so that tries are counted; the problem is raised afterwards
    const { outcome, person_id: personId } = await this.work.write(undefined, (tx) => this.repository.signIn(tx, attempt));
    if (personId === null) throw new Problem(outcome === 'wrong' ? 'wrong_code' : 'code_expired');
    const actor = { sessionId, personId };
    await this.acceptance.acceptAll(actor);
    return { actor, me: await this.me(actor), tokens: { access: this.accessToken(actor), refresh } };
  }

  async provePresence(actor: Actor, code: string): Promise<void> {
    const now = this.clock.now();
    const outcome = await this.work.write(actor, async (tx) => {
      const email = await this.repository.email(tx);
      return await this.repository.provePresence(tx, actor.sessionId, this.hash(email, code), now);
    });
    if (outcome !== 'right') throw new Problem(outcome === 'wrong' ? 'wrong_code' : 'code_expired');
  }

  async refresh(token: string): Promise<SessionTokens> {
    const next = newRefreshToken();
    const row = await this.work.write(undefined, (tx) => this.repository.refresh(tx, refreshHash(token), refreshHash(next), this.clock.now()));
    if (!row?.session_id || !row.person_id) throw new Problem('not_signed_in');
    const access = this.accessToken({ sessionId: row.session_id, personId: row.person_id });
    return row.outcome === 'rotated' ? { access, refresh: next } : { access };
  }

  async signOut(actor: Actor): Promise<void> {
    await this.work.write(actor, (tx) => this.repository.endSession(tx, actor.sessionId, this.clock.now()));
  }

  me(actor: Actor): Promise<Me> {
    return this.work.read(actor, (tx) => this.repository.me(tx, this.clock.now()));
  }

  async setName(actor: Actor, name: string): Promise<Me> {
    await this.work.write(actor, (tx) => this.repository.setName(tx, name));
    return await this.me(actor);
  }

  async acceptInvitations(actor: Actor): Promise<Me> {
    await this.acceptance.acceptAll(actor);
    return await this.me(actor);
  }

  private async sendCode(tx: Tx, email: string, now: Date): Promise<void> {
    const id = v7();
    await this.repository.askForCode(tx, id, email, now);
    await this.queue.enqueue(tx, 'send_code', { codeId: id });
  }

  private hash(email: string, code: string): Buffer {
    return codeHash(this.configuration.CODE_SECRET, email, code);
  }

  private accessToken(actor: Actor): string {
    return jwt.sign({ sid: actor.sessionId, sub: actor.personId }, this.configuration.JWT_SECRET, { algorithm: 'HS256', expiresIn: '10m' });
  }
}
