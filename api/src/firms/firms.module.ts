import { Module } from '@nestjs/common';
import { FirmInvitationsService } from './firm-invitations.service.ts';
import { FirmsController } from './firms.controller.ts';
import { FirmsRepository } from './firms.repository.ts';
import { FirmsService } from './firms.service.ts';
import { MembersController } from './members.controller.ts';
import { MembersRepository } from './members.repository.ts';
import { MembersService } from './members.service.ts';
import { PricingController } from './pricing.controller.ts';
import { PricingService } from './pricing.service.ts';

@Module({ controllers: [FirmsController, MembersController, PricingController], providers: [FirmsService, FirmInvitationsService, MembersService, PricingService, FirmsRepository, MembersRepository] })
export class FirmsModule {}
