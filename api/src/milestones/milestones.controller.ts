import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/milestones';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { MilestonesService } from './milestones.service.ts';

const Job = () => Param('jobId', { schema: Id });
const Milestone = () => Param('milestoneId', { schema: Id });

@ApiTags('milestones')
@Controller('jobs/:jobId/milestones')
export class MilestonesController {
  constructor(private readonly milestones: MilestonesService) {}

  @Get() @Route('milestone.read', 'read') @ApiOkResponse({ standardSchema: S.MilestoneList })
  list(@CurrentActor() actor: Actor, @Job() jobId: string): Promise<S.MilestoneList> {
    return this.milestones.list(actor, jobId);
  }

  @Get(':milestoneId') @Route('milestone.read', 'read') @ApiOkResponse({ standardSchema: S.MilestoneDetail })
  get(@CurrentActor() actor: Actor, @Job() jobId: string, @Milestone() milestoneId: string): Promise<S.MilestoneDetail> {
    return this.milestones.milestone(actor, jobId, milestoneId);
  }

  @Post(':milestoneId/plan') @Route('milestone.plan', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.MilestoneDetail })
  async plan(
    @CurrentActor() actor: Actor, @Job() jobId: string, @Milestone() milestoneId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.PlanMilestone }) body: S.PlanMilestone, @Res({ passthrough: true }) response: Response,
  ): Promise<S.MilestoneDetail> {
    return answer(response, await this.milestones.plan({ actor, jobId, milestoneId, key }, body));
  }

  @Post(':milestoneId/start') @Route('milestone.claim', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.MilestoneDetail })
  async start(
    @CurrentActor() actor: Actor, @Job() jobId: string, @Milestone() milestoneId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.StartMilestone }) body: S.StartMilestone, @Res({ passthrough: true }) response: Response,
  ): Promise<S.MilestoneDetail> {
    return answer(response, await this.milestones.start({ actor, jobId, milestoneId, key }, body));
  }

  @Post(':milestoneId/claim') @Route('milestone.claim', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.MilestoneDetail })
  async claim(
    @CurrentActor() actor: Actor, @Job() jobId: string, @Milestone() milestoneId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.ClaimMilestone }) body: S.ClaimMilestone, @Res({ passthrough: true }) response: Response,
  ): Promise<S.MilestoneDetail> {
    return answer(response, await this.milestones.claim({ actor, jobId, milestoneId, key }, body));
  }

  @Post(':milestoneId/inspections') @Route('milestone.prove', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.MilestoneDetail })
  async inspect(
    @CurrentActor() actor: Actor, @Job() jobId: string, @Milestone() milestoneId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.Inspect }) body: S.Inspect, @Res({ passthrough: true }) response: Response,
  ): Promise<S.MilestoneDetail> {
    return answer(response, await this.milestones.inspect({ actor, jobId, milestoneId, key }, body));
  }

  @Post(':milestoneId/reopen') @Route('milestone.reopen', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.MilestoneDetail })
  async reopen(
    @CurrentActor() actor: Actor, @Job() jobId: string, @Milestone() milestoneId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.ReopenMilestone }) body: S.ReopenMilestone, @Res({ passthrough: true }) response: Response,
  ): Promise<S.MilestoneDetail> {
    return answer(response, await this.milestones.reopen({ actor, jobId, milestoneId, key }, body));
  }
}
