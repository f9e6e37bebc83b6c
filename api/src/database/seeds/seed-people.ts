import type { INestApplicationContext } from '@nestjs/common';
import pg from 'pg';
import { v7 } from 'uuid';
import { AuthRepository } from '../../auth/auth.repository.ts';
import { AuthService } from '../../auth/auth.service.ts';
import { SessionCookies } from '../../auth/cookies.ts';
import { codeHash, newCode } from '../../auth/tokens.ts';
import { Clock } from '../../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../../common/configuration.ts';
import { Problem } from '../../common/problem.ts';
import { UnitOfWork, type Actor } from '../../common/unit-of-work.ts';
import { Persona } from './persona.ts';

/**
 * People of the demo, who come in as everybody does: a code is asked for and entered. The seed stands in for the worker that makes the
 * code, so that no mail is waited for. The clocks of this process alone can be set, for a story that spans months.
 */
export class SeedPeople {
  private readonly signedIn: Actor[] = [];

  private constructor(
    private readonly web: INestApplicationContext,
    private readonly worker: INestApplicationContext,
    private readonly url: string,
    private readonly configuration: Configuration,
    private readonly connection: pg.Client,
  ) {}

  static async connect(web: INestApplicationContext, worker: INestApplicationContext, url: string): Promise<SeedPeople> {
    const configuration = web.get<Configuration>(CONFIGURATION);
    const connection = new pg.Client({ connectionString: configuration.DATABASE_WORKER_URL });
    await connection.connect();
    return new SeedPeople(web, worker, url, configuration, connection);
  }

  /** From now on the clocks of this process stand at this instant. */
  at(instant: Date): void {
    for (const context of [this.web, this.worker]) Object.assign(context.get(Clock), { now: () => new Date(instant) });
  }

  async databaseIsEmpty(): Promise<boolean> {
    return (await this.connection.query<{ empty: boolean }>('select app.is_empty() as empty')).rows[0]?.empty ?? false;
  }

  /** Signs somebody in by a code, accepts what they were invited to, and gives them their name. */
  async signIn(email: string, name: string): Promise<Persona> {
    const now = this.web.get(Clock).now();
    const id = v7();
    await this.web.get(UnitOfWork).write(undefined, (tx) => this.web.get(AuthRepository).askForCode(tx, id, email, now));
    const code = newCode();
    await this.connection.query('select app.set_code($1, $2, $3)', [id, codeHash(this.configuration.CODE_SECRET, email, code), now]);
    const arrived = await this.web.get(AuthService).signIn({ email, code }, 'demo');
    if (!('me' in arrived)) throw new Error(`${email} has a second step, which the seed can't give.`);
    const { me, actor, tokens } = arrived;
    this.signedIn.push(actor);
    if (me.person.name !== name) await this.web.get(AuthService).setName(actor, name);
    return new Persona(this.url, this.configuration.PUBLIC_URL, `${new SessionCookies(this.configuration.PUBLIC_URL).accessName}=${tokens.access}`);
  }

  /** Nobody stays signed in: the demo's people shall not find sessions that they never began. */
  async close(): Promise<void> {
    for (const actor of this.signedIn) await this.web.get(AuthService).signOut(actor).catch(unlessOver);
    await this.connection.end();
  }
}

function unlessOver(error: unknown): void {
  if (!(error instanceof Problem) || error.code !== 'not_signed_in') throw error;
}
