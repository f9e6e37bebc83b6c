import { Module } from '@nestjs/common';
import { InvitationAcceptance } from './invitation-acceptance.ts';
import { PeopleController } from './people.controller.ts';
import { PeopleRepository } from './people.repository.ts';
import { PeopleService } from './people.service.ts';

@Module({
  controllers: [PeopleController],
  providers: [PeopleService, PeopleRepository, InvitationAcceptance],
  exports: [InvitationAcceptance],
})
export class PeopleModule {}
