import { Injectable } from '@nestjs/common';
import { canonicalText } from '@tallypole/shared/record';
import { createHash } from 'node:crypto';
import type { Json } from './canonical.ts';
import { Problem } from './problem.ts';
import { UnitOfWork, type Actor, type Tx } from './unit-of-work.ts';

export interface Command<T> {
  /** What is done, as people name it: `job.create`. */
  operation: string;
  /** The idempotency key, made when the form opened. */
  key: string;
  input: Json;
  /** Runs on every call, a replay included. */
  authorize(tx: Tx): Promise<unknown>;
  act(tx: Tx): Promise<T>;
}

export interface Answered<T> {
  answer: T;
  replayed: boolean;
}

/** Claims the key, acts and stores the answer in one transaction. Only a committed answer is stored: an error leaves no trace. */
@Injectable()
export class CommandRunner {
  constructor(private readonly work: UnitOfWork) {}

  run<T extends Json | object>(actor: Actor, command: Command<T>): Promise<Answered<T>> {
    return this.work.write(actor, (tx) => this.inside(tx, actor.personId, command));
  }

  /** The same in a transaction in which somebody acts already: a guest, who has no session of their own. */
  async inside<T extends Json | object>(tx: Tx, personId: string, command: Command<T>): Promise<Answered<T>> {
    const hash = createHash('sha256').update(canonicalText(command.input)).digest();
    const id = [personId, command.operation, command.key];
    const claimed = await tx.one(
      'insert into command (actor_id, operation, key, input_hash) values ($1, $2, $3, $4) on conflict do nothing returning key',
      [...id, hash],
    );
    await command.authorize(tx);
    if (!claimed) return await this.replay<T>(tx, id, hash);
    const answer = await command.act(tx);
    await tx.rows('select app.answer($1, $2, $3, $4)', [...id, JSON.stringify(answer)]);
    return { answer, replayed: false };
  }

  private async replay<T>(tx: Tx, id: string[], hash: Buffer): Promise<Answered<T>> {
    const before = await tx.one<{ input_hash: Buffer; answer: string | null }>(
      'select input_hash, answer from command where actor_id = $1 and operation = $2 and key = $3',
      id,
    );
    if (!before?.answer || !before.input_hash.equals(hash)) throw new Problem('key_reused');
    return { answer: JSON.parse(before.answer) as T, replayed: true };
  }
}
