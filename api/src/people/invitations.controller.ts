import { Body, Controller, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/people';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { InvitationsService } from './invitations.service.ts';

const Job = () => Param('jobId', { schema: Id });
const Invitation = () => Param('invitationId', { schema: Id });

@ApiTags('people')
@Controller('jobs/:jobId/invitations')
export class InvitationsController {
  constructor(private readonly invitations: InvitationsService) {}

  @Post() @Route('people.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.JobPeople })
  async invite(@CurrentActor() actor: Actor, @Job() jobId: string, @Body({ schema: S.Invite }) body: S.Invite, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.JobPeople> {
    return answer(response, await this.invitations.invite(actor, jobId, body, key));
  }

  @Post(':invitationId/again') @Route('people.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.JobPeople })
  async again(@CurrentActor() actor: Actor, @Job() jobId: string, @Invitation() id: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.JobPeople> {
    return answer(response, await this.invitations.sendAgain(actor, jobId, id, key));
  }

  @Post(':invitationId/revoke') @Route('people.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.JobPeople })
  async revoke(@CurrentActor() actor: Actor, @Job() jobId: string, @Invitation() id: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.JobPeople> {
    return answer(response, await this.invitations.revoke(actor, jobId, id, key));
  }
}
