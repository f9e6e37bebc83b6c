import { Body, Controller, HttpCode, Param, Post, Req, Res } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import * as S from '@tallypole/shared/schemas/changes';
import { Id } from '@tallypole/shared/schemas/common';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { ChangeActsService } from './change-acts.service.ts';

const JobId = () => Param('jobId', { schema: Id });
const ChangeId = () => Param('changeId', { schema: Id });

@ApiTags('changes')
@Controller('jobs/:jobId/changes/:changeId')
export class ChangeActsController {
  constructor(private readonly acts: ChangeActsService) {}

  @Post('ask-review') @HttpCode(200) @Route('change.price', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async askReview(@CurrentActor() actor: Actor, @JobId() jobId: string, @ChangeId() changeId: string, @Body({ schema: S.AskReview }) body: S.AskReview, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Change> {
    return answer(response, await this.acts.askReview(actor, jobId, changeId, body, key));
  }

  @Post('reviews') @HttpCode(200) @Route('change.review', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async review(@CurrentActor() actor: Actor, @JobId() jobId: string, @ChangeId() changeId: string, @Body({ schema: S.AttachReview }) body: S.AttachReview, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Change> {
    return answer(response, await this.acts.review(actor, jobId, changeId, body, key));
  }

  @Post('issue') @HttpCode(200) @Route('change.issue', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async issue(@CurrentActor() actor: Actor, @JobId() jobId: string, @ChangeId() changeId: string, @Body({ schema: S.IssueChange }) body: S.IssueChange, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Change> {
    return answer(response, await this.acts.issue(actor, jobId, changeId, body, key));
  }

  @Post('sign') @HttpCode(200) @Route('change.decide', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async sign(@CurrentActor() actor: Actor, @JobId() jobId: string, @ChangeId() changeId: string, @Body({ schema: S.SignChange }) body: S.SignChange, @IdempotencyKey() key: string, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<S.Change> {
    const browser = { address: request.ip ?? 'unknown', userAgent: request.get('user-agent') ?? '' };
    return answer(response, await this.acts.sign(actor, jobId, changeId, body, browser, key));
  }

  @Post('decline') @HttpCode(200) @Route('change.decide', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async decline(@CurrentActor() actor: Actor, @JobId() jobId: string, @ChangeId() changeId: string, @Body({ schema: S.DeclineChange }) body: S.DeclineChange, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Change> {
    return answer(response, await this.acts.decline(actor, jobId, changeId, body.reason, key));
  }

  @Post('withdraw') @HttpCode(200) @Route('change.issue', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async withdraw(@CurrentActor() actor: Actor, @JobId() jobId: string, @ChangeId() changeId: string, @Body({ schema: S.WithdrawChange }) body: S.WithdrawChange, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.Change> {
    return answer(response, await this.acts.withdraw(actor, jobId, changeId, body.reason, key));
  }
}
