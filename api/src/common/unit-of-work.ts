import { Inject, Injectable } from '@nestjs/common';
import { getConnectionToken } from '@nestjs/sequelize';
import { QueryTypes, type Sequelize, type Transaction } from 'sequelize';
import type { Permission } from '@tallypole/shared/schemas/permissions';
import type { Role } from '@tallypole/shared/schemas/roles';
import { requireRole } from './access.ts';
import { Clock } from './clock.ts';
import { Problem } from './problem.ts';
import { isConnectionLost, sqlState } from './sql-state.ts';

/** Who acts: a person in a session, and since when they have proven to be present. */
export interface Actor {
  sessionId: string;
  personId: string;
}

/** Somebody who came by a link: they act as a person without an address, in one visit, on what the link is for. */
export interface Guest {
  sessionId: string;
  linkId: string;
  firmId: string;
  jobId: string;
  personId: string;
  firmName: string;
  /** Their address, masked. */
  sentTo: string;
  expiresAt: Date;
  /** When the visit's last code was entered; until then nothing of the link is shown. */
  confirmedAt: Date | null;
}

/** One open transaction and the statements in it. */
export class Tx {
  statements = 0;

  constructor(
    readonly sequelize: Sequelize,
    readonly transaction: Transaction,
  ) {}

  async rows<T extends object>(sql: string, bind: unknown[] = []): Promise<T[]> {
    this.statements += 1;
    return await this.sequelize.query<T>(sql, { bind, transaction: this.transaction, type: QueryTypes.SELECT });
  }

  async one<T extends object>(sql: string, bind: unknown[] = []): Promise<T | undefined> {
    return (await this.rows<T>(sql, bind))[0];
  }
}

const RETRIED = new Set(['40P01', '40001']);
const RETRIES = 3;

@Injectable()
export class UnitOfWork {
  constructor(
    @Inject(getConnectionToken()) private readonly writing: Sequelize,
    @Inject(getConnectionToken('read')) private readonly reading: Sequelize,
    private readonly clock: Clock,
  ) {}

  /** Read-only and repeatable by the role's defaults: one page's figures agree. */
  read<T>(actor: Actor, work: (tx: Tx) => Promise<T>): Promise<T> {
    return this.transact(this.reading, (tx) => actAs(tx, actor, this.clock.now()), work);
  }

  /** A read on one job: session, roles and permission in one trip. */
  readJob<T>(actor: Actor, jobId: string, permission: Permission, work: (tx: Tx, roles: Role[]) => Promise<T>): Promise<T> {
    let roles: Role[] = [];
    const begin = async (tx: Tx) => {
      roles = await actOnJob(tx, actor, jobId, this.clock.now());
      requireRole(roles, permission);
    };
    return this.transact(this.reading, begin, (tx) => work(tx, roles));
  }

  /** A read by a guest, who is known by the hash of their visit's token. */
  readAsGuest<T>(visit: Buffer, work: (tx: Tx, guest: Guest) => Promise<T>): Promise<T> {
    return this.transact(this.reading, () => Promise.resolve(), async (tx) => work(tx, await actAsGuest(tx, visit, this.clock.now())));
  }

  writeAsGuest<T>(visit: Buffer, work: (tx: Tx, guest: Guest) => Promise<T>): Promise<T> {
    return this.write(undefined, async (tx) => work(tx, await actAsGuest(tx, visit, this.clock.now())));
  }

  /** READ COMMITTED; deadlocks and serialization failures are tried again. Without an actor only definer functions work. */
  async write<T>(actor: Actor | undefined, work: (tx: Tx) => Promise<T>): Promise<T> {
    const begin = async (tx: Tx) => {
      if (actor) await actAs(tx, actor, this.clock.now());
    };
    for (let left = RETRIES; ; left -= 1) {
      try {
        return await this.transact(this.writing, begin, work);
      } catch (error) {
        if (left === 0 || !RETRIED.has(sqlState(error) ?? '')) throw error;
        await new Promise((done) => setTimeout(done, 20 + Math.random() * 60));
      }
    }
  }

  /** For the worker alone: acts as the firm's system person. */
  writeAsFirm<T>(firmId: string, work: (tx: Tx, systemPersonId: string) => Promise<T>): Promise<T> {
    let who = '';
    const begin = async (tx: Tx) => {
      who = (await tx.one<{ act_as_system: string }>('select app.act_as_system($1)', [firmId]))?.act_as_system ?? '';
    };
    return this.transact(this.writing, begin, (tx) => work(tx, who));
  }

  private async transact<T>(pool: Sequelize, begin: (tx: Tx) => Promise<void>, work: (tx: Tx) => Promise<T>): Promise<T> {
    let done = false;
    try {
      return await pool.transaction(async (transaction) => {
        const tx = new Tx(pool, transaction);
        await begin(tx);
        const result = await work(tx);
        done = true;
        return result;
      });
    } catch (error) {
      // only the commit was left, and its answer never came
      if (done && pool === this.writing && isConnectionLost(error)) throw new Problem('unclear');
      throw error;
    }
  }
}

async function actAs(tx: Tx, actor: Actor, now: Date): Promise<void> {
  try {
    await tx.rows('select app.act_as($1, $2, $3)', [actor.sessionId, actor.personId, now]);
  } catch (error) {
    throw sqlState(error) === 'TP002' ? new Problem('not_signed_in') : error;
  }
}

async function actOnJob(tx: Tx, actor: Actor, jobId: string, now: Date): Promise<Role[]> {
  try {
    const row = await tx.one<{ roles: Role[] }>('select app.act_on_job($1, $2, $3, $4) as roles', [actor.sessionId, actor.personId, now, jobId]);
    return row?.roles ?? [];
  } catch (error) {
    throw sqlState(error) === 'TP002' ? new Problem('not_signed_in') : error;
  }
}

async function actAsGuest(tx: Tx, visit: Buffer, now: Date): Promise<Guest> {
  try {
    const guest = await tx.one<Guest>(
      `select session_id as "sessionId", link_id as "linkId", firm_id as "firmId", job_id as "jobId", person_id as "personId", firm_name as "firmName",
         sent_to as "sentTo", expires_at as "expiresAt", confirmed_at as "confirmedAt" from app.act_as_guest($1, $2)`,
      [visit, now],
    );
    if (!guest) throw new Problem('visit_over');
    return guest;
  } catch (error) {
    throw sqlState(error) === 'TP002' ? new Problem('visit_over') : error;
  }
}
