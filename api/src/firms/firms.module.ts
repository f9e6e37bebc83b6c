import { Module } from '@nestjs/common';
import { ErasureService } from './erasure.service.ts';
import { FirmInvitationsService } from './firm-invitations.service.ts';
import { FirmSettingsController } from './firm-settings.controller.ts';
import { FirmSettingsRepository } from './firm-settings.repository.ts';
import { FirmSettingsService } from './firm-settings.service.ts';
import { FirmsController } from './firms.controller.ts';
import { FirmsRepository } from './firms.repository.ts';
import { FirmsService } from './firms.service.ts';
import { LogoService } from './logo.service.ts';
import { MembersController } from './members.controller.ts';
import { MembersRepository } from './members.repository.ts';
import { MembersService } from './members.service.ts';
import { PricingController } from './pricing.controller.ts';
import { PricingService } from './pricing.service.ts';

@Module({
  controllers: [FirmsController, FirmSettingsController, MembersController, PricingController],
  providers: [FirmsService, FirmSettingsService, LogoService, ErasureService, FirmInvitationsService, MembersService, PricingService, FirmsRepository, FirmSettingsRepository, MembersRepository],
})
export class FirmsModule {}
