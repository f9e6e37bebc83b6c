import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/people';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { PeopleService } from './people.service.ts';

@ApiTags('people')
@Controller('jobs/:jobId')
export class PeopleController {
  constructor(private readonly people: PeopleService) {}

  @Get('people') @Route('people.read', 'read') @ApiOkResponse({ standardSchema: S.JobPeople })
  list(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.JobPeople> {
    return this.people.people(actor, jobId);
  }

  @Post('invitations') @Route('people.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.JobPeople })
  async invite(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Body({ schema: S.Invite }) body: S.Invite,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.JobPeople> {
    return answer(response, await this.people.invite(actor, jobId, body, key));
  }
}
