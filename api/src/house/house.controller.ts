import { Controller, Get, Param } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/house';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { HouseService } from './house.service.ts';

@ApiTags('house')
@Controller()
export class HouseController {
  constructor(private readonly houses: HouseService) {}

  @Get('jobs/:jobId/house') @Route('job.read', 'read') @ApiOkResponse({ standardSchema: S.House })
  house(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.House> {
    return this.houses.house(actor, jobId);
  }

  @Get('waits') @Route('signed_in', 'read') @ApiOkResponse({ standardSchema: S.AllWaits })
  waits(@CurrentActor() actor: Actor): Promise<S.AllWaits> {
    return this.houses.waiting(actor);
  }
}
