import { Module } from '@nestjs/common';
import { ChangeReissueModule } from '../changes/changes.module.ts';
import { InvitationAcceptanceModule } from './invitation-acceptance.module.ts';
import { InvitationsController } from './invitations.controller.ts';
import { InvitationsService } from './invitations.service.ts';
import { PeopleController } from './people.controller.ts';
import { PeopleMails } from './people-mails.ts';
import { PeopleRepository } from './people.repository.ts';
import { PeopleService } from './people.service.ts';

@Module({
  imports: [ChangeReissueModule, InvitationAcceptanceModule],
  controllers: [PeopleController, InvitationsController],
  providers: [PeopleService, PeopleMails, PeopleRepository, InvitationsService],
})
export class PeopleModule {}
