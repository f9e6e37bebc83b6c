import { Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { Me } from '@tallypole/shared/schemas/auth';
import type { Tx } from '../common/unit-of-work.ts';

/** What becomes the session, or the wait for a second step. */
export interface Arrival {
  id: string;
  tokenHash: Buffer;
  userAgent: string;
  now: Date;
}

/** `second`: the first step was right, the second one is waited for. */
export type Outcome = 'right' | 'second' | 'wrong' | 'expired';

@Injectable()
export class AuthRepository {
  async askForCode(tx: Tx, id: string, email: string, now: Date): Promise<void> {
    await tx.rows('select app.ask_for_code($1, $2, $3)', [id, email, now]);
  }

  async signIn(tx: Tx, email: string, codeHash: Buffer, a: Arrival): Promise<{ outcome: Outcome; person_id: string | null }> {
    const bind = [email, codeHash, v7(), a.id, a.tokenHash, a.userAgent, a.now];
    const row = await tx.one<{ outcome: Outcome; person_id: string | null }>('select * from app.sign_in($1, $2, $3, $4, $5, $6, $7)', bind);
    return row ?? { outcome: 'expired', person_id: null };
  }

  passwordOf(tx: Tx, email: string): Promise<{ person_id: string; hash: string } | undefined> {
    return tx.one('select person_id, hash from app.password_of($1)', [email]);
  }

  async signInByPassword(tx: Tx, found: { person_id: string; hash: string }, a: Arrival): Promise<Outcome> {
    const bind = [found.person_id, found.hash, a.id, a.tokenHash, a.userAgent, a.now];
    return (await tx.one<{ outcome: Outcome }>('select app.sign_in_by_password($1, $2, $3, $4, $5, $6) as outcome', bind))?.outcome ?? 'wrong';
  }

  /** Counts a try at the second step; from here on the person acts in this transaction. Undefined where nothing is waited for any more. */
  async resumeSignIn(tx: Tx, token: Buffer, now: Date): Promise<{ personId: string; tries: number } | undefined> {
    const row = await tx.one<{ person_id: string | null; tries: number }>('select * from app.resume_sign_in($1, $2)', [token, now]);
    return row?.person_id ? { personId: row.person_id, tries: row.tries } : undefined;
  }

  async finishSignIn(tx: Tx, token: Buffer, a: Arrival): Promise<boolean> {
    return (await tx.one<{ done: boolean }>('select app.finish_sign_in($1, $2, $3, $4, $5) as done', [token, a.id, a.tokenHash, a.userAgent, a.now]))?.done ?? false;
  }

  async provePresence(tx: Tx, sessionId: string, codeHash: Buffer, now: Date): Promise<string> {
    const row = await tx.one<{ outcome: string }>('select app.prove_presence($1, $2, $3) as outcome', [sessionId, codeHash, now]);
    return row?.outcome ?? 'expired';
  }

  async isPresent(tx: Tx, sessionId: string, now: Date): Promise<void> {
    await tx.rows('update session set present_at = $2 where id = $1', [sessionId, now]);
  }

  async refresh(tx: Tx, sessionId: string, hash: Buffer, next: Buffer, now: Date) {
    return await tx.one<{ outcome: 'over' | 'rotated' | 'kept' | 'reused'; person_id: string | null }>('select * from app.refresh_session($1, $2, $3, $4)', [sessionId, hash, next, now]);
  }

  async endSession(tx: Tx, sessionId: string, now: Date): Promise<void> {
    await tx.rows('update session set ended_at = $2 where id = $1 and ended_at is null', [sessionId, now]);
  }

  async endOtherSessions(tx: Tx, sessionId: string, now: Date): Promise<void> {
    await tx.rows('select app.end_other_sessions($1, $2)', [sessionId, now]);
  }

  async presentAt(tx: Tx, sessionId: string): Promise<Date | undefined> {
    return (await tx.one<{ present_at: Date }>('select present_at from session where id = $1', [sessionId]))?.present_at;
  }

  async person(tx: Tx): Promise<{ name: string | null; email: string }> {
    return (await tx.one<{ name: string | null; email: string }>('select name, email from person where id = app.actor()')) ?? { name: null, email: '' };
  }

  async setName(tx: Tx, name: string): Promise<void> {
    await tx.rows('update person set name = $1 where id = app.actor()', [name]);
  }

  /** Who I am and where: one statement. */
  async me(tx: Tx, now: Date, secondStepRequired: boolean): Promise<Me> {
    const row = await tx.one<{ me: Me }>(ME, [now, secondStepRequired]);
    if (!row) throw new Error('The person is gone.');
    return row.me;
  }
}

/** Whether somebody has a second step, and what their roles ask for: those who handle money need one. $2: whether the deployment insists. */
export const SECOND_STEP_USE = /* sql */ `
  case when exists (select 1 from totp t where t.person_id = app.actor() and t.confirmed_at is not null) then 'on'
    when exists (select 1 from firm_member m where m.person_id = app.actor() and m.role in ('principal', 'books'))
      or exists (select 1 from job_member m where m.person_id = app.actor() and m.role = 'lender' and m.ended_at is null)
    then case when $2 then 'required' else 'advised' end
    else 'optional' end`;

const ME = /* sql */ `
  select json_build_object(
    'person', json_build_object('id', p.id, 'name', p.name, 'email', p.email),
    'secondStep', ${SECOND_STEP_USE},
    'firms', (select coalesce(json_agg(json_build_object('id', f.id, 'name', f.name, 'role', m.role) order by f.name), '[]')
      from firm_member m join firm f on f.id = m.firm_id where m.person_id = p.id),
    'jobs', (select coalesce(json_agg(j order by j.name), '[]') from (
      select j.id, j.name, j.firm_id as "firmId", f.name as "firmName", json_agg(m.role order by m.role) as roles
      from job_member m join job j on j.id = m.job_id join firm f on f.id = j.firm_id
      where m.person_id = p.id and m.ended_at is null group by j.id, f.name limit 200) j),
    'invitations', (select coalesce(json_agg(json_build_object('id', i.id, 'role', i.role, 'jobName', i.job_name, 'firmName', i.firm_name)), '[]')
      from app.my_invitations($1) i)) as me
  from person p where p.id = app.actor()`;
