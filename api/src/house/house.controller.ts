import { Controller, Get, Param } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/house';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { HouseService } from './house.service.ts';

@ApiTags('house')
@Controller('jobs/:jobId/house')
export class HouseController {
  constructor(private readonly houses: HouseService) {}

  @Get() @Route('job.read', 'read') @ApiOkResponse({ standardSchema: S.House })
  house(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.House> {
    return this.houses.house(actor, jobId);
  }
}
