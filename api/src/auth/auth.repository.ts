import { Injectable } from '@nestjs/common';
import type { Me } from '@tallypole/shared/schemas/auth';
import type { Tx } from '../common/unit-of-work.ts';

export interface SignInAttempt {
  email: string;
  codeHash: Buffer;
  personId: string;
  sessionId: string;
  refreshHash: Buffer;
  userAgent: string;
  now: Date;
}

@Injectable()
export class AuthRepository {
  async askForCode(tx: Tx, id: string, email: string, now: Date): Promise<void> {
    await tx.rows('select app.ask_for_code($1, $2, $3)', [id, email, now]);
  }

  async signIn(tx: Tx, a: SignInAttempt): Promise<{ outcome: string; person_id: string | null }> {
    const bind = [a.email, a.codeHash, a.personId, a.sessionId, a.refreshHash, a.userAgent, a.now];
    const row = await tx.one<{ outcome: string; person_id: string | null }>('select * from app.sign_in($1, $2, $3, $4, $5, $6, $7)', bind);
    return row ?? { outcome: 'expired', person_id: null };
  }

  async provePresence(tx: Tx, sessionId: string, codeHash: Buffer, now: Date): Promise<string> {
    const row = await tx.one<{ outcome: string }>('select app.prove_presence($1, $2, $3) as outcome', [sessionId, codeHash, now]);
    return row?.outcome ?? 'expired';
  }

  async refresh(tx: Tx, hash: Buffer, next: Buffer, now: Date) {
    return await tx.one<{ outcome: string; session_id: string | null; person_id: string | null }>('select * from app.refresh_session($1, $2, $3)', [hash, next, now]);
  }

  async endSession(tx: Tx, sessionId: string, now: Date): Promise<void> {
    await tx.rows('update session set ended_at = $2 where id = $1 and ended_at is null', [sessionId, now]);
  }

  async presentAt(tx: Tx, sessionId: string): Promise<Date | undefined> {
    return (await tx.one<{ present_at: Date }>('select present_at from session where id = $1', [sessionId]))?.present_at;
  }

  async email(tx: Tx): Promise<string> {
    return (await tx.one<{ email: string }>('select email from person where id = app.actor()'))?.email ?? '';
  }

  async setName(tx: Tx, name: string): Promise<void> {
    await tx.rows('update person set name = $1 where id = app.actor()', [name]);
  }


  /** Who I am and where: one statement. */
  async me(tx: Tx, now: Date): Promise<Me> {
    const row = await tx.one<{ me: Me }>(ME, [now]);
    if (!row) throw new Error('The person is gone.');
    return row.me;
  }
}

const ME = /* sql */ `
  select json_build_object(
    'person', json_build_object('id', p.id, 'name', p.name, 'email', p.email),
    'firms', (select coalesce(json_agg(json_build_object('id', f.id, 'name', f.name, 'role', m.role) order by f.name), '[]')
      from firm_member m join firm f on f.id = m.firm_id where m.person_id = p.id),
    'jobs', (select coalesce(json_agg(j order by j.name), '[]') from (
      select j.id, j.name, j.firm_id as "firmId", f.name as "firmName", json_agg(m.role order by m.role) as roles
      from job_member m join job j on j.id = m.job_id join firm f on f.id = j.firm_id
      where m.person_id = p.id and m.ended_at is null group by j.id, f.name limit 200) j),
    'invitations', (select coalesce(json_agg(json_build_object('id', i.id, 'role', i.role, 'jobName', i.job_name, 'firmName', i.firm_name)), '[]')
      from app.my_invitations($1) i)) as me
  from person p where p.id = app.actor()`;
