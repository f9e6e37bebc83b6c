import { Module } from '@nestjs/common';
import { ScheduleOfValuesController } from './schedule-of-values.controller.ts';
import { ScheduleOfValuesRepository } from './schedule-of-values.repository.ts';
import { ScheduleOfValuesService } from './schedule-of-values.service.ts';

@Module({ controllers: [ScheduleOfValuesController], providers: [ScheduleOfValuesService, ScheduleOfValuesRepository] })
export class ScheduleOfValuesModule {}
