import { Module } from '@nestjs/common';
import { MilestoneMails } from './milestone-mails.ts';
import { MilestonesController } from './milestones.controller.ts';
import { MilestonesRepository } from './milestones.repository.ts';
import { MilestonesService } from './milestones.service.ts';

@Module({ controllers: [MilestonesController], providers: [MilestonesService, MilestonesRepository, MilestoneMails] })
export class MilestonesModule {}
