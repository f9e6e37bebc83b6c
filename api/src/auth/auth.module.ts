import { Module } from '@nestjs/common';
import { PassportModule } from '@nestjs/passport';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { InvitationAcceptanceModule } from '../people/invitation-acceptance.module.ts';
import { AccountNoticeRepository } from './account-notice.repository.ts';
import { AccountNotices } from './account-notices.ts';
import { AccountController } from './account.controller.ts';
import { AccountRepository } from './account.repository.ts';
import { AccountService } from './account.service.ts';
import { AddressService } from './address.service.ts';
import { AuthController } from './auth.controller.ts';
import { AuthRepository } from './auth.repository.ts';
import { AuthService } from './auth.service.ts';
import { JwtStrategy } from './jwt.strategy.ts';
import { Presence } from './presence.ts';
import { SecondStepCheck } from './second-step-check.ts';
import { SecondStepService } from './second-step.service.ts';

@Module({
  imports: [PassportModule, InvitationAcceptanceModule],
  controllers: [AuthController, AccountController],
  providers: [
    AuthService, AuthRepository, JwtStrategy, RateLimitGuard, Presence, AccountService, AccountRepository, AccountNotices, AccountNoticeRepository, AddressService,
    SecondStepService, SecondStepCheck,
  ],
  exports: [Presence, AccountRepository],
})
export class AuthModule {}
