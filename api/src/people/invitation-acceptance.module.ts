import { Module } from '@nestjs/common';
import { InvitationAcceptance } from './invitation-acceptance.ts';
import { InvitationsRepository } from './invitations.repository.ts';

/** For whoever signs somebody in. */
@Module({ providers: [InvitationsRepository, InvitationAcceptance], exports: [InvitationsRepository, InvitationAcceptance] })
export class InvitationAcceptanceModule {}
