import { Module } from '@nestjs/common';
import { PassportModule } from '@nestjs/passport';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { InvitationAcceptanceModule } from '../people/invitation-acceptance.module.ts';
import { AuthController } from './auth.controller.ts';
import { AuthRepository } from './auth.repository.ts';
import { AuthService } from './auth.service.ts';
import { JwtStrategy } from './jwt.strategy.ts';
import { Presence } from './presence.ts';

@Module({
  imports: [PassportModule, InvitationAcceptanceModule],
  controllers: [AuthController],
  providers: [AuthService, AuthRepository, JwtStrategy, RateLimitGuard, Presence],
  exports: [Presence],
})
export class AuthModule {}
