import { Injectable, Logger } from '@nestjs/common';
import type { Ready } from '@tallypole/shared/schemas/health';
import { Problem } from '../common/problem.ts';
import { missingMigrations } from '../database/migrator.ts';
import { ReadinessRepository } from './readiness.repository.ts';

@Injectable()
export class ReadinessService {
  private readonly logger = new Logger('readiness');
  /** Migrations only go forward: what was current once stays so for this build. */
  private migrationsCurrent = false;

  constructor(private readonly repository: ReadinessRepository) {}

  async check(): Promise<Ready> {
    try {
      await this.repository.bothPools();
    } catch (error) {
      throw this.refuse('The database does not answer.', error);
    }
    await this.checkMigrations();
    try {
      return { status: 'ready', queueWaitingSeconds: await this.repository.queueWaitingSeconds() };
    } catch (error) {
      throw this.refuse('The queue cannot be reached.', error);
    }
  }

  private async checkMigrations(): Promise<void> {
    if (this.migrationsCurrent) return;
    const missing = await this.repository.appliedMigrations().then(missingMigrations, () => ['all']);
    if (missing.length > 0) throw this.refuse(`Migrations are missing: ${missing.join(', ')}.`);
    this.migrationsCurrent = true;
  }

  private refuse(detail: string, error?: unknown): Problem {
    this.logger.warn({ event: 'not ready', detail, err: error });
    return new Problem('busy', { detail });
  }
}
