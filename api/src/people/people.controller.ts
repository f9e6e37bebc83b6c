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
@Controller()
export class PeopleController {
  constructor(private readonly people: PeopleService) {}

  @Get('jobs/:jobId/people') @Route('people.read', 'read') @ApiOkResponse({ standardSchema: S.JobPeople })
  list(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.JobPeople> {
    return this.people.people(actor, jobId);
  }

  @Post('jobs/:jobId/people/:personId/remove') @Route('people.remove', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.JobPeople })
  async remove(
    @CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string, @Param('personId', { schema: Id }) personId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.RemovePerson }) body: S.RemovePerson, @Res({ passthrough: true }) response: Response,
  ): Promise<S.JobPeople> {
    return answer(response, await this.people.remove(actor, jobId, personId, body, key));
  }

  @Get('invitations/:invitationId') @Route('signed_in', 'read') @ApiOkResponse({ standardSchema: S.MyInvitation })
  invitation(@CurrentActor() actor: Actor, @Param('invitationId', { schema: Id }) invitationId: string): Promise<S.MyInvitation> {
    return this.people.myInvitation(actor, invitationId);
  }
}
