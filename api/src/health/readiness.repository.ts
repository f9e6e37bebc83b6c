import { Inject, Injectable } from '@nestjs/common';
import { getConnectionToken } from '@nestjs/sequelize';
import { QueryTypes, type Sequelize } from 'sequelize';
import type { AppliedMigration } from '../database/migrator.ts';

/** Asks outside of any unit of work: nobody acts here. */
@Injectable()
export class ReadinessRepository {
  constructor(
    @Inject(getConnectionToken()) private readonly writing: Sequelize,
    @Inject(getConnectionToken('read')) private readonly reading: Sequelize,
  ) {}

  async bothPools(): Promise<void> {
    await Promise.all([this.writing, this.reading].map((pool) => pool.query('select 1', { type: QueryTypes.SELECT })));
  }

  appliedMigrations(): Promise<AppliedMigration[]> {
    return this.reading.query<AppliedMigration>('select name, sha256 from app.applied_migrations()', { type: QueryTypes.SELECT });
  }

  /** Fails where the queue's schema or the right to use it is missing. */
  async queueWaitingSeconds(): Promise<number> {
    const [row] = await this.writing.query<{ seconds: number }>('select graphile_worker.waiting_seconds() as seconds', { type: QueryTypes.SELECT });
    return row?.seconds ?? 0;
  }
}
