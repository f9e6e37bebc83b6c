import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/members';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { MembersService } from './members.service.ts';

@ApiTags('firms')
@Controller('firms/:firmId')
export class MembersController {
  constructor(private readonly members: MembersService) {}

  @Get('members') @Route('firm.read', 'read') @ApiOkResponse({ standardSchema: S.Members })
  list(@CurrentActor() actor: Actor, @Param('firmId', { schema: Id }) firmId: string): Promise<S.Members> {
    return this.members.members(actor, firmId);
  }

  @Post('invitations') @Route('firm.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Members })
  async invite(
    @CurrentActor() actor: Actor,
    @Param('firmId', { schema: Id }) firmId: string,
    @Body({ schema: S.InviteMember }) body: S.InviteMember,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Members> {
    return answer(response, await this.members.invite(actor, firmId, body, key));
  }
}
