import { Body, Controller, Get, HttpCode, Inject, Post, Req, Res } from '@nestjs/common';
import { ApiAcceptedResponse, ApiCreatedResponse, ApiNoContentResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import * as S from '@tallypole/shared/schemas/auth';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { AuthService, type Arrived } from './auth.service.ts';
import { SessionCookies } from './cookies.ts';

@ApiTags('auth')
@Controller()
export class AuthController {
  private readonly cookies: SessionCookies;

  constructor(
    private readonly auth: AuthService,
    @Inject(CONFIGURATION) configuration: Configuration,
  ) {
    this.cookies = new SessionCookies(configuration.PUBLIC_URL);
  }

  @Post('auth/codes') @HttpCode(202) @Route('public', 'code') @ApiAcceptedResponse({ standardSchema: S.CodeSent })
  askForCode(@Body({ schema: S.AskForCode }) body: S.AskForCode): Promise<S.CodeSent> {
    return this.auth.askForCode(body.email);
  }

  @Post('auth/sessions') @Route('public', 'sign_in') @ApiCreatedResponse({ standardSchema: S.Me }) @ApiAcceptedResponse({ standardSchema: S.SecondStepAsked })
  async signIn(@Body({ schema: S.SignIn }) body: S.SignIn, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<S.Me | S.SecondStepAsked> {
    return this.letIn(response, await this.auth.signIn(body, request.get('user-agent') ?? ''));
  }

  @Post('auth/sessions/by-password') @Route('public', 'sign_in') @ApiCreatedResponse({ standardSchema: S.Me }) @ApiAcceptedResponse({ standardSchema: S.SecondStepAsked })
  async signInByPassword(@Body({ schema: S.SignInByPassword }) body: S.SignInByPassword, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<S.Me | S.SecondStepAsked> {
    return this.letIn(response, await this.auth.signInByPassword(body, request.get('user-agent') ?? ''));
  }

  @Post('auth/sessions/second-step') @Route('public', 'sign_in') @ApiCreatedResponse({ standardSchema: S.Me })
  async secondStep(@Body({ schema: S.SecondStep }) body: S.SecondStep, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<S.Me | S.SecondStepAsked> {
    const waiting = this.cookies.waiting(request);
    if (!waiting) throw new Problem('sign_in_over');
    return this.letIn(response, await this.auth.secondStep(waiting, body.code, request.get('user-agent') ?? ''));
  }

  @Post('auth/refresh') @HttpCode(204) @Route('public', 'sign_in') @ApiNoContentResponse()
  async refresh(@Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<void> {
    const token = this.cookies.refresh(request);
    if (!token) throw new Problem('not_signed_in');
    this.cookies.set(response, await this.auth.refresh(token, request.get('user-agent') ?? ''));
  }

  @Post('auth/sign-out') @HttpCode(204) @Route('signed_in', 'sign_in') @ApiNoContentResponse()
  async signOut(@CurrentActor() actor: Actor, @Res({ passthrough: true }) response: Response): Promise<void> {
    await this.auth.signOut(actor);
    this.cookies.clear(response);
    response.setHeader('Clear-Site-Data', '"storage"');
  }

  @Post('auth/presence/codes') @HttpCode(202) @Route('signed_in', 'code') @ApiAcceptedResponse({ standardSchema: S.PresenceAsked })
  askForPresence(@CurrentActor() actor: Actor): Promise<S.PresenceAsked> {
    return this.auth.askForPresence(actor);
  }

  @Post('auth/presence') @HttpCode(204) @Route('signed_in', 'sign_in') @ApiNoContentResponse()
  provePresence(@CurrentActor() actor: Actor, @Body({ schema: S.ProvePresence }) body: S.ProvePresence): Promise<void> {
    return this.auth.provePresence(actor, body.code);
  }

  @Get('me') @Route('signed_in', 'read') @ApiOkResponse({ standardSchema: S.Me })
  me(@CurrentActor() actor: Actor): Promise<S.Me> {
    return this.auth.me(actor);
  }

  @Post('me/name') @HttpCode(200) @Route('signed_in', 'write') @ApiOkResponse({ standardSchema: S.Me })
  setName(@CurrentActor() actor: Actor, @Body({ schema: S.Name }) body: S.Name): Promise<S.Me> {
    return this.auth.setName(actor, body.name);
  }

  @Post('invitations/accept') @HttpCode(200) @Route('signed_in', 'write') @ApiOkResponse({ standardSchema: S.Me })
  accept(@CurrentActor() actor: Actor): Promise<S.Me> {
    return this.auth.acceptInvitations(actor);
  }

  private letIn(response: Response, arrived: Arrived): S.Me | S.SecondStepAsked {
    if ('waitingToken' in arrived) {
      this.cookies.wait(response, arrived.waitingToken);
      response.status(202);
      return { next: 'second_step' };
    }
    this.cookies.waitOver(response);
    this.cookies.set(response, arrived.tokens);
    return arrived.me;
  }
}
