import { Injectable } from '@nestjs/common';
import type { Account } from '@tallypole/shared/schemas/auth-account';
import type { Tx } from '../common/unit-of-work.ts';
import { SECOND_STEP_USE } from './auth.repository.ts';
import { deviceWords } from './device-words.ts';
import type { Sealed } from './secret-box.ts';

/** A person's second step as it is kept. */
export interface KeptStep extends Sealed {
  recoverySalt: Buffer | null;
  confirmedAt: Date | null;
  lastStep: number;
  wrongTries: number;
  wrongSince: Date | null;
}

/** How a person gets in; rows of others are out of reach, so nobody is named. */
@Injectable()
export class AccountRepository {
  async account(tx: Tx, sessionId: string, now: Date, secondStepRequired: boolean): Promise<Account> {
    const row = await tx.one<{ account: Account }>(ACCOUNT, [now, secondStepRequired, sessionId]);
    if (!row) throw new Error('The person is gone.');
    const { sessions, ...rest } = row.account;
    return { ...rest, sessions: sessions.map(({ device, ...session }) => ({ ...session, device: deviceWords(device) })) };
  }

  async setPassword(tx: Tx, hash: string, now: Date): Promise<'set' | 'changed'> {
    const row = await tx.one<{ before: boolean }>('select exists (select 1 from password where person_id = app.actor()) as before');
    await tx.rows('insert into password (person_id, hash, set_at) values (app.actor(), $1, $2) on conflict (person_id) do update set hash = $1, set_at = $2', [hash, now]);
    return row?.before ? 'changed' : 'set';
  }

  async removePassword(tx: Tx): Promise<boolean> {
    return (await tx.rows('delete from password where person_id = app.actor() returning person_id')).length > 0;
  }

  async lockStep(tx: Tx): Promise<KeptStep | undefined> {
    return await tx.one<KeptStep>(
      `select key_id as "keyId", secret, recovery_salt as "recoverySalt", confirmed_at as "confirmedAt", last_step as "lastStep", wrong_tries as "wrongTries",
         wrong_since as "wrongSince" from totp where person_id = app.actor() for update`,
    );
  }

  async hasStep(tx: Tx): Promise<boolean> {
    return (await tx.one('select 1 as has from totp where person_id = app.actor() and confirmed_at is not null')) !== undefined;
  }

  /** A key that no code has confirmed yet; the one before is dropped. */
  async startStep(tx: Tx, { keyId, secret }: Sealed, now: Date): Promise<void> {
    await tx.rows('delete from totp where person_id = app.actor() and confirmed_at is null');
    await tx.rows('insert into totp (person_id, key_id, secret, created_at) values (app.actor(), $1, $2, $3)', [keyId, secret, now]);
  }

  /** A code of this time step was right; later ones alone are good from now on. */
  async usedStep(tx: Tx, step: number, { keyId, secret }: Sealed, now: Date): Promise<void> {
    await tx.rows(
      `update totp set last_step = $1, key_id = $2, secret = $3, wrong_tries = 0, wrong_since = null, confirmed_at = coalesce(confirmed_at, $4) where person_id = app.actor()`,
      [step, keyId, secret, now],
    );
  }

  async wrongCode(tx: Tx, tries: number, since: Date): Promise<void> {
    await tx.rows('update totp set wrong_tries = $1, wrong_since = $2 where person_id = app.actor()', [tries, since]);
  }

  async removeStep(tx: Tx): Promise<boolean> {
    return (await tx.rows('delete from totp where person_id = app.actor() returning person_id')).length > 0;
  }

  async keepRecoveryCodes(tx: Tx, salt: Buffer, hashes: readonly Buffer[]): Promise<void> {
    await tx.rows('delete from recovery_code where person_id = app.actor()');
    await tx.rows('update totp set recovery_salt = $1 where person_id = app.actor()', [salt]);
    for (const hash of hashes) await tx.rows('insert into recovery_code (person_id, code_hash) values (app.actor(), $1)', [hash]);
  }

  /** How many are left after this one was used; undefined where it isn't one, or no longer. */
  async useRecoveryCode(tx: Tx, hash: Buffer, now: Date): Promise<number | undefined> {
    const used = await tx.rows('update recovery_code set used_at = $2 where person_id = app.actor() and code_hash = $1 and used_at is null returning person_id', [hash, now]);
    if (used.length === 0) return undefined;
    return (await tx.one<{ left: number }>('select count(*)::int as left from recovery_code where person_id = app.actor() and used_at is null'))?.left ?? 0;
  }

  async endSession(tx: Tx, sessionId: string, now: Date): Promise<boolean> {
    return (await tx.rows('update session set ended_at = $2 where id = $1 and person_id = app.actor() and ended_at is null returning id', [sessionId, now])).length > 0;
  }

  async askForAddress(tx: Tx, id: string, email: string, now: Date): Promise<void> {
    await tx.rows('select app.ask_for_address($1, $2, $3)', [id, email, now]);
  }

  async changeAddress(tx: Tx, sessionId: string, hash: Buffer, now: Date) {
    return await tx.one<{ outcome: 'right' | 'wrong' | 'expired' | 'taken'; change_id: string | null }>('select * from app.change_address($1, $2, $3)', [sessionId, hash, now]);
  }

  async undoAddress(tx: Tx, tokenHash: Buffer, now: Date) {
    return await tx.one<{ outcome: 'right' | 'over' | 'taken'; email: string | null }>('select * from app.undo_address($1, $2)', [tokenHash, now]);
  }
}

const ISO = `'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'`;
const iso = (column: string) => `to_char(${column} at time zone 'UTC', ${ISO})`;

const ACCOUNT = /* sql */ `
  select json_build_object(
    'password', (select json_build_object('setAt', ${iso('w.set_at')}) from password w where w.person_id = app.actor()),
    'secondStep', json_build_object('use', ${SECOND_STEP_USE},
      'since', (select ${iso('t.confirmed_at')} from totp t where t.person_id = app.actor() and t.confirmed_at is not null),
      'recoveryCodesLeft', (select count(*) from recovery_code r where r.person_id = app.actor() and r.used_at is null)),
    'sessions', (select coalesce(json_agg(json_build_object('id', s.id, 'device', s.user_agent, 'startedAt', ${iso('s.created_at')}, 'lastSeenAt', ${iso('s.rotated_at')},
        'endsAt', ${iso('least(s.expires_at, s.rotated_at + app.session_idle())')}, 'current', s.id = $3) order by s.id = $3 desc, s.rotated_at desc), '[]')
      from session s where s.person_id = app.actor() and s.ended_at is null and s.expires_at > $1 and s.rotated_at + app.session_idle() > $1)) as account
  from person p where p.id = app.actor()`;
