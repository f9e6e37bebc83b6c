import { Inject, Injectable, type CanActivate, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import type { Request } from 'express';
import { actsWithSecondStep } from '@tallypole/shared/schemas/auth-account';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { ACCESS } from '../common/route.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { AccountRepository } from './account.repository.ts';
import { secondStepRequired } from './second-step-required.ts';

/** Refuses acts on money and bank data to whoever has no second step. Whoever has one could not have signed in without it. */
@Injectable()
export class SecondStepGuard implements CanActivate {
  private readonly required: boolean;

  constructor(
    private readonly reflector: Reflector,
    private readonly work: UnitOfWork,
    private readonly repository: AccountRepository,
    @Inject(CONFIGURATION) configuration: Configuration,
  ) {
    this.required = secondStepRequired(configuration);
  }

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const access = this.reflector.get<string | undefined>(ACCESS, context.getHandler());
    const { method, user } = context.switchToHttp().getRequest<Request & { user?: Actor }>();
    if (!this.required || method === 'GET' || !user || !actsWithSecondStep.some((permission) => permission === access)) return true;
    if (!(await this.work.read(user, (tx) => this.repository.hasStep(tx)))) throw new Problem('second_step_needed');
    return true;
  }
}
