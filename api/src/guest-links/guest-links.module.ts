import { Module } from '@nestjs/common';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { FilesModule } from '../files/files.module.ts';
import { GuestActsService } from './guest-acts.service.ts';
import { GuestController } from './guest.controller.ts';
import { GuestLinksController } from './guest-links.controller.ts';
import { GuestLinksRepository } from './guest-links.repository.ts';
import { GuestLinksService } from './guest-links.service.ts';
import { GuestRepository } from './guest.repository.ts';
import { GuestService } from './guest.service.ts';

@Module({
  imports: [FilesModule],
  controllers: [GuestLinksController, GuestController],
  providers: [GuestLinksService, GuestLinksRepository, GuestService, GuestActsService, GuestRepository, RateLimitGuard],
})
export class GuestLinksModule {}
