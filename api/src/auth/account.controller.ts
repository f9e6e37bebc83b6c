import { Body, Controller, Get, HttpCode, Param, Post } from '@nestjs/common';
import { ApiAcceptedResponse, ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { CodeSent, Me } from '@tallypole/shared/schemas/auth';
import * as S from '@tallypole/shared/schemas/auth-account';
import { Id } from '@tallypole/shared/schemas/common';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { AccountService } from './account.service.ts';
import { AddressService } from './address.service.ts';
import { SecondStepService } from './second-step.service.ts';

@ApiTags('account')
@Controller()
export class AccountController {
  constructor(
    private readonly account: AccountService,
    private readonly steps: SecondStepService,
    private readonly addresses: AddressService,
  ) {}

  @Get('me/account') @Route('signed_in', 'read') @ApiOkResponse({ standardSchema: S.Account })
  read(@CurrentActor() actor: Actor): Promise<S.Account> {
    return this.account.read(actor);
  }

  @Post('me/password') @HttpCode(200) @Route('signed_in', 'sign_in') @ApiOkResponse({ standardSchema: S.Account })
  setPassword(@CurrentActor() actor: Actor, @Body({ schema: S.SetPassword }) body: S.SetPassword): Promise<S.Account> {
    return this.account.setPassword(actor, body.password);
  }

  @Post('me/password/remove') @HttpCode(200) @Route('signed_in', 'write') @ApiOkResponse({ standardSchema: S.Account })
  removePassword(@CurrentActor() actor: Actor): Promise<S.Account> {
    return this.account.removePassword(actor);
  }

  @Post('me/second-step') @Route('signed_in', 'sign_in') @ApiCreatedResponse({ standardSchema: S.SecondStepKey })
  startSecondStep(@CurrentActor() actor: Actor): Promise<S.SecondStepKey> {
    return this.steps.start(actor);
  }

  @Post('me/second-step/confirm') @HttpCode(200) @Route('signed_in', 'sign_in') @ApiOkResponse({ standardSchema: S.RecoveryCodes })
  confirmSecondStep(@CurrentActor() actor: Actor, @Body({ schema: S.ConfirmSecondStep }) body: S.ConfirmSecondStep): Promise<S.RecoveryCodes> {
    return this.steps.confirm(actor, body.code);
  }

  @Post('me/second-step/recovery-codes') @HttpCode(200) @Route('signed_in', 'sign_in') @ApiOkResponse({ standardSchema: S.RecoveryCodes })
  renewRecoveryCodes(@CurrentActor() actor: Actor): Promise<S.RecoveryCodes> {
    return this.steps.renewRecoveryCodes(actor);
  }

  @Post('me/second-step/remove') @HttpCode(200) @Route('signed_in', 'sign_in') @ApiOkResponse({ standardSchema: S.Account })
  async removeSecondStep(@CurrentActor() actor: Actor): Promise<S.Account> {
    await this.steps.remove(actor);
    return await this.account.read(actor);
  }

  @Post('me/sessions/end-others') @HttpCode(200) @Route('signed_in', 'write') @ApiOkResponse({ standardSchema: S.Account })
  endOtherSessions(@CurrentActor() actor: Actor): Promise<S.Account> {
    return this.account.endOtherSessions(actor);
  }

  @Post('me/sessions/:sessionId/end') @HttpCode(200) @Route('signed_in', 'write') @ApiOkResponse({ standardSchema: S.Account })
  endSession(@CurrentActor() actor: Actor, @Param('sessionId', { schema: Id }) sessionId: string): Promise<S.Account> {
    return this.account.endSession(actor, sessionId);
  }

  @Post('me/address/codes') @HttpCode(202) @Route('signed_in', 'code') @ApiAcceptedResponse({ standardSchema: CodeSent })
  askForAddress(@CurrentActor() actor: Actor, @Body({ schema: S.AskForAddress }) body: S.AskForAddress): Promise<CodeSent> {
    return this.addresses.ask(actor, body.email);
  }

  @Post('me/address') @HttpCode(200) @Route('signed_in', 'sign_in') @ApiOkResponse({ standardSchema: Me })
  changeAddress(@CurrentActor() actor: Actor, @Body({ schema: S.ChangeAddress }) body: S.ChangeAddress): Promise<Me> {
    return this.addresses.change(actor, body.code);
  }

  @Post('auth/address/undo') @HttpCode(200) @Route('public', 'sign_in') @ApiOkResponse({ standardSchema: S.AskForAddress })
  undoAddress(@Body({ schema: S.UndoAddress }) body: S.UndoAddress): Promise<S.AskForAddress> {
    return this.addresses.undo(body.token);
  }
}
