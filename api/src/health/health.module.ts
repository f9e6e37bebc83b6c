import { Module } from '@nestjs/common';
import { GentleStop } from './gentle-stop.ts';
import { HealthController } from './health.controller.ts';
import { ReadinessRepository } from './readiness.repository.ts';
import { ReadinessService } from './readiness.service.ts';

@Module({ controllers: [HealthController], providers: [GentleStop, ReadinessService, ReadinessRepository] })
export class HealthModule {}
