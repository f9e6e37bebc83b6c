import { Module } from '@nestjs/common';
import { HouseController } from './house.controller.ts';
import { HouseRepository } from './house.repository.ts';
import { HouseService } from './house.service.ts';
import { WaitsRepository } from './waits.repository.ts';

@Module({ controllers: [HouseController], providers: [HouseService, HouseRepository, WaitsRepository] })
export class HouseModule {}
