import { Body, Controller, Get, Param, Post, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id, ListQuery } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/jobs';
import { answer } from '../common/answer.ts';
import { ApiQueryOf } from '../common/api-query.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { JobsService } from './jobs.service.ts';

@ApiTags('jobs')
@Controller('jobs')
export class JobsController {
  constructor(private readonly jobs: JobsService) {}

  @Get() @Route('signed_in', 'read') @ApiQueryOf(ListQuery) @ApiOkResponse({ standardSchema: S.JobList })
  list(@CurrentActor() actor: Actor, @Query({ schema: ListQuery }) query: ListQuery): Promise<S.JobList> {
    return this.jobs.list(actor, query);
  }

  @Post() @Route('job.create', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Job })
  async create(
    @CurrentActor() actor: Actor,
    @Body({ schema: S.CreateJob }) body: S.CreateJob,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Job> {
    return answer(response, await this.jobs.create(actor, body, key));
  }

  @Get(':jobId') @Route('job.read', 'read') @ApiOkResponse({ standardSchema: S.Job })
  get(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.Job> {
    return this.jobs.job(actor, jobId);
  }
}
