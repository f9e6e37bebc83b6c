import { Body, Controller, Get, HttpCode, Param, Post, Req, Res } from '@nestjs/common';
import { ApiBody, ApiConsumes, ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/schedule-of-values';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { uploadBody } from '../files/upload-body.ts';
import { receiveSchedule } from './receive-schedule.ts';
import { ScheduleOfValuesService } from './schedule-of-values.service.ts';

@ApiTags('schedule of values')
@Controller('jobs/:jobId/schedule')
export class ScheduleOfValuesController {
  constructor(private readonly schedules: ScheduleOfValuesService) {}

  @Get() @Route('schedule_of_values.read', 'read') @ApiOkResponse({ standardSchema: S.ScheduleOfValues })
  get(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.ScheduleOfValues> {
    return this.schedules.schedule(actor, jobId);
  }

  @Post('preview') @HttpCode(200) @Route('schedule_of_values.import', 'upload') @ApiConsumes('multipart/form-data') @ApiBody(uploadBody()) @ApiOkResponse({ standardSchema: S.SchedulePreview })
  async preview(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Req() request: Request,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.SchedulePreview> {
    const contract = await this.schedules.contract(actor, jobId);
    return await this.schedules.preview(await receiveSchedule(request, response), contract);
  }

  @Post() @Route('schedule_of_values.import', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.ScheduleOfValues })
  async import(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Body({ schema: S.ImportSchedule }) body: S.ImportSchedule,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.ScheduleOfValues> {
    return answer(response, await this.schedules.import(actor, jobId, body, key));
  }
}
