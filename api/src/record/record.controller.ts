import { Controller, Get, Param, Query } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/record';
import { ApiQueryOf } from '../common/api-query.ts';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { RecordPagesService } from './record-pages.service.ts';

@ApiTags('record')
@Controller('jobs/:jobId/record')
export class RecordController {
  constructor(private readonly service: RecordPagesService) {}

  @Get() @Route('record.read', 'read') @ApiQueryOf(S.RecordQuery) @ApiOkResponse({ standardSchema: S.RecordPart })
  part(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string, @Query({ schema: S.RecordQuery }) query: S.RecordQuery): Promise<S.RecordPart> {
    return this.service.part(actor, jobId, query);
  }
}
