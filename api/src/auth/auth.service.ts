import { Inject, Injectable } from '@nestjs/common';
import jwt from 'jsonwebtoken';
import { v7 } from 'uuid';
import type { CodeSent, Me, PresenceAsked, SignIn, SignInByPassword } from '@tallypole/shared/schemas/auth';
import { Clock } from '../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { InvitationAcceptance } from '../people/invitation-acceptance.ts';
import { AccountNotices } from './account-notices.ts';
import { AccountRepository } from './account.repository.ts';
import { AuthRepository, type Outcome } from './auth.repository.ts';
import type { SessionTokens } from './cookies.ts';
import { deviceWords } from './device-words.ts';
import { SecondStepCheck } from './second-step-check.ts';
import { secondStepRequired } from './second-step-required.ts';
import { isPassword } from './slow-hash.ts';
import { codeHash, newRefreshToken, sessionOfToken, tokenHash } from './tokens.ts';

export const CODE_MINUTES = 10;
/** Codes that one address may ask for. */
export const CODES_PER_ADDRESS = { hits: 6, seconds: 900 };
/** Passwords that may be tried for one address; a mailed code still lets its owner in. */
const PASSWORDS_PER_ADDRESS = { hits: 10, seconds: 900 };
/** Codes that may be tried for one sign-in's second step. */
const STEP_TRIES = 5;

export interface SignedIn {
  actor: Actor;
  me: Me;
  tokens: SessionTokens;
}
/** Signed in, or the token of a sign-in that waits for its second step. */
export type Arrived = SignedIn | { waitingToken: string };

@Injectable()
export class AuthService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: AuthRepository,
    private readonly account: AccountRepository,
    private readonly queue: QueueRepository,
    private readonly acceptance: InvitationAcceptance,
    private readonly limits: RateLimitGuard,
    private readonly check: SecondStepCheck,
    private readonly notices: AccountNotices,
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

  async signIn({ email, code }: SignIn, userAgent: string): Promise<Arrived> {
    const a = this.arrival(userAgent);
    // a wrong code is committed, so that tries are counted; the problem is raised afterwards
    const { outcome, person_id: personId } = await this.work.write(undefined, (tx) => this.repository.signIn(tx, email, this.hash(email, code), a));
    if (personId === null) throw new Problem(outcome === 'wrong' ? 'wrong_code' : 'code_expired');
    return await this.arrived(outcome, { sessionId: a.id, personId }, a.token);
  }

  /** An unknown address, one without a password and a wrong password look and take the same. */
  async signInByPassword({ email, password }: SignInByPassword, userAgent: string): Promise<Arrived> {
    await this.limits.take(`password:${email}`, PASSWORDS_PER_ADDRESS);
    const found = await this.work.write(undefined, (tx) => this.repository.passwordOf(tx, email));
    const right = await isPassword(found?.hash, password);
    if (!found || !right) throw new Problem('wrong_password');
    const a = this.arrival(userAgent);
    const outcome = await this.work.write(undefined, (tx) => this.repository.signInByPassword(tx, found, a));
    if (outcome === 'wrong') throw new Problem('wrong_password');
    return await this.arrived(outcome, { sessionId: a.id, personId: found.person_id }, a.token);
  }

  async secondStep(waitingToken: string, code: string, userAgent: string): Promise<SignedIn> {
    const a = this.arrival(userAgent);
    const waiting = tokenHash(waitingToken);
    const done = await this.work.write(undefined, async (tx) => {
      const resumed = await this.repository.resumeSignIn(tx, waiting, a.now);
      if (!resumed) return undefined;
      const { personId } = resumed;
      const outcome = await this.check.code(tx, personId, code, a.now);
      if (outcome === 'right') await this.repository.finishSignIn(tx, waiting, a);
      else if (resumed.tries === STEP_TRIES) await this.notices.post(tx, personId, 'second-step-refused', { device: deviceWords(userAgent) });
      return { personId, outcome };
    });
    if (!done || done.outcome === 'none') throw new Problem('sign_in_over');
    if (done.outcome !== 'right') throw this.check.refusal(done.outcome);
    return await this.enter({ sessionId: a.id, personId: done.personId }, a.token);
  }

  /** Whoever has a second step shows it; whoever has none is mailed a code. */
  async askForPresence(actor: Actor): Promise<PresenceAsked> {
    const { email, hasStep } = await this.work.write(actor, async (tx) => ({ ...(await this.repository.person(tx)), hasStep: await this.account.hasStep(tx) }));
    return hasStep ? { by: 'authenticator' } : { by: 'mail', ...(await this.askForCode(email)) };
  }

  async provePresence(actor: Actor, code: string): Promise<void> {
    const now = this.clock.now();
    const outcome = await this.work.write(actor, async (tx) => {
      const bySecondStep = await this.check.code(tx, actor.personId, code, now);
      if (bySecondStep === 'right') await this.repository.isPresent(tx, actor.sessionId, now);
      if (bySecondStep !== 'none') return { bySecondStep };
      const { email } = await this.repository.person(tx);
      return { byMail: await this.repository.provePresence(tx, actor.sessionId, this.hash(email, code), now) };
    });
    if (outcome.bySecondStep !== undefined && outcome.bySecondStep !== 'right') throw this.check.refusal(outcome.bySecondStep);
    if (outcome.byMail !== undefined && outcome.byMail !== 'right') throw new Problem(outcome.byMail === 'wrong' ? 'wrong_code' : 'code_expired');
  }

  /** A token that was used up before ends its session, and its person hears of it: somebody keeps a copy. */
  async refresh(token: string, userAgent: string): Promise<SessionTokens> {
    const sessionId = sessionOfToken(this.configuration.JWT_SECRET, token);
    if (!sessionId) throw new Problem('not_signed_in');
    const next = newRefreshToken(this.configuration.JWT_SECRET, sessionId);
    const row = await this.work.write(undefined, async (tx) => {
      const answered = await this.repository.refresh(tx, sessionId, tokenHash(token), tokenHash(next), this.clock.now());
      if (answered?.outcome === 'reused' && answered.person_id) await this.notices.post(tx, answered.person_id, 'session-reused', { device: deviceWords(userAgent) });
      return answered;
    });
    if (!row?.person_id || (row.outcome !== 'rotated' && row.outcome !== 'kept')) throw new Problem('not_signed_in');
    const access = this.accessToken({ sessionId, personId: row.person_id });
    return row.outcome === 'rotated' ? { access, refresh: next } : { access };
  }

  async signOut(actor: Actor): Promise<void> {
    await this.work.write(actor, (tx) => this.repository.endSession(tx, actor.sessionId, this.clock.now()));
  }

  me(actor: Actor): Promise<Me> {
    return this.work.read(actor, (tx) => this.repository.me(tx, this.clock.now(), secondStepRequired(this.configuration)));
  }

  async setName(actor: Actor, name: string): Promise<Me> {
    await this.work.write(actor, (tx) => this.repository.setName(tx, name));
    return await this.me(actor);
  }

  async acceptInvitations(actor: Actor): Promise<Me> {
    await this.acceptance.acceptAll(actor);
    return await this.me(actor);
  }

  private arrival(userAgent: string) {
    const id = v7();
    const token = newRefreshToken(this.configuration.JWT_SECRET, id);
    return { id, token, tokenHash: tokenHash(token), userAgent, now: this.clock.now() };
  }

  private async arrived(outcome: Outcome, actor: Actor, token: string): Promise<Arrived> {
    return outcome === 'second' ? { waitingToken: token } : await this.enter(actor, token);
  }

  private async enter(actor: Actor, refresh: string): Promise<SignedIn> {
    await this.acceptance.acceptAll(actor);
    return { actor, me: await this.me(actor), tokens: { access: this.accessToken(actor), refresh } };
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
