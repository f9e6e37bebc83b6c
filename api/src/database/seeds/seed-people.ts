import type { INestApplicationContext } from '@nestjs/common';
import pg from 'pg';
import { v7 } from 'uuid';
import { AuthRepository } from '../../auth/auth.repository.ts';
import { AuthService } from '../../auth/auth.service.ts';
import { codeHash, newCode } from '../../auth/tokens.ts';
import { Clock } from '../../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../../common/configuration.ts';
import { UnitOfWork, type Actor } from '../../common/unit-of-work.ts';

/**
 * People of the demo, who come in as everybody does: a code is asked for and entered. The seed stands in for the worker that makes the
 * code, so that no mail is waited for. The clock of this process alone can be set, for a story that spans months.
 */
export class SeedPeople {
  private constructor(
    private readonly app: INestApplicationContext,
    private readonly configuration: Configuration,
    private readonly worker: pg.Client,
  ) {}

  static async connect(app: INestApplicationContext): Promise<SeedPeople> {
    const configuration = app.get<Configuration>(CONFIGURATION);
    const worker = new pg.Client({ connectionString: configuration.DATABASE_WORKER_URL });
    await worker.connect();
    return new SeedPeople(app, configuration, worker);
  }

  /** From now on the clock of this process stands at this instant. */
  at(instant: string): void {
    const now = new Date(instant);
    Object.assign(this.app.get(Clock), { now: () => new Date(now) });
  }

  async databaseIsEmpty(): Promise<boolean> {
    return (await this.worker.query<{ empty: boolean }>('select app.is_empty() as empty')).rows[0]?.empty ?? false;
  }

  /** Signs somebody in by a code, accepts what they were invited to, and gives them their name. */
  async signIn(email: string, name: string): Promise<Actor> {
    const now = this.app.get(Clock).now();
    const id = v7();
    await this.app.get(UnitOfWork).write(undefined, (tx) => this.app.get(AuthRepository).askForCode(tx, id, email, now));
    const code = newCode();
    await this.worker.query('select app.set_code($1, $2, $3)', [id, codeHash(this.configuration.CODE_SECRET, email, code), now]);
    const { me, actor } = await this.app.get(AuthService).signIn({ email, code }, 'demo');
    if (me.person.name !== name) await this.app.get(AuthService).setName(actor, name);
    return actor;
  }

  async close(): Promise<void> {
    await this.worker.end();
  }
}
