import { Controller, Get, Inject } from '@nestjs/common';
import { getConnectionToken } from '@nestjs/sequelize';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Sequelize } from 'sequelize';
import { Problem } from '../common/problem.ts';
import { Route } from '../common/route.ts';

@ApiTags('health')
@Controller('health')
export class HealthController {
  constructor(
    @Inject(getConnectionToken()) private readonly writing: Sequelize,
    @Inject(getConnectionToken('read')) private readonly reading: Sequelize,
  ) {}

  /** Answers when the process runs and both pools reach the database. */
  @Get() @Route('public', 'read') @ApiOkResponse()
  async health(): Promise<{ status: 'ok' }> {
    try {
      await Promise.all([this.writing.authenticate({ logging: false }), this.reading.authenticate({ logging: false })]);
    } catch {
      throw new Problem('busy', { detail: 'The database does not answer.' });
    }
    return { status: 'ok' };
  }
}
