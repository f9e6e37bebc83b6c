import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/members';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { FirmInvitationsService } from './firm-invitations.service.ts';
import { MembersService } from './members.service.ts';

const Firm = () => Param('firmId', { schema: Id });
const Person = () => Param('personId', { schema: Id });
const Invitation = () => Param('invitationId', { schema: Id });

@ApiTags('firms')
@Controller('firms/:firmId')
export class MembersController {
  constructor(
    private readonly members: MembersService,
    private readonly invitations: FirmInvitationsService,
  ) {}

  @Get('members') @Route('firm.read', 'read') @ApiOkResponse({ standardSchema: S.Members })
  list(@CurrentActor() actor: Actor, @Firm() firmId: string): Promise<S.Members> {
    return this.members.members(actor, firmId);
  }

  @Post('members/:personId/role') @Route('firm.members', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Members })
  async setRole(
    @CurrentActor() actor: Actor, @Firm() firmId: string, @Person() personId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.SetMemberRole }) body: S.SetMemberRole, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Members> {
    return answer(response, await this.members.setRole(actor, firmId, personId, body, key));
  }

  @Post('members/:personId/end') @Route('firm.members', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Members })
  async end(@CurrentActor() actor: Actor, @Firm() firmId: string, @Person() personId: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Members> {
    return answer(response, await this.members.end(actor, firmId, personId, key));
  }

  @Post('invitations') @Route('firm.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Members })
  async invite(@CurrentActor() actor: Actor, @Firm() firmId: string, @Body({ schema: S.InviteMember }) body: S.InviteMember, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Members> {
    return answer(response, await this.invitations.invite(actor, firmId, body, key));
  }

  @Post('invitations/:invitationId/again') @Route('firm.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Members })
  async again(@CurrentActor() actor: Actor, @Firm() firmId: string, @Invitation() id: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Members> {
    return answer(response, await this.invitations.sendAgain(actor, firmId, id, key));
  }

  @Post('invitations/:invitationId/revoke') @Route('firm.invite', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Members })
  async revoke(@CurrentActor() actor: Actor, @Firm() firmId: string, @Invitation() id: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Members> {
    return answer(response, await this.invitations.revoke(actor, firmId, id, key));
  }
}
