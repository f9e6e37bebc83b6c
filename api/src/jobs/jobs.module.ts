import { Module } from '@nestjs/common';
import { SequelizeModule } from '@nestjs/sequelize';
import { JobModel } from './job.model.ts';
import { JobsController } from './jobs.controller.ts';
import { JobsRepository } from './jobs.repository.ts';
import { JobsService } from './jobs.service.ts';

@Module({ imports: [SequelizeModule.forFeature([JobModel])], controllers: [JobsController], providers: [JobsService, JobsRepository], exports: [JobsRepository] })
export class JobsModule {}
