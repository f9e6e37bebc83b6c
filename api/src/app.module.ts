import { Module } from '@nestjs/common';
import { APP_FILTER, APP_GUARD, APP_PIPE } from '@nestjs/core';
import { AuthModule } from './auth/auth.module.ts';
import { JwtGuard } from './auth/jwt.guard.ts';
import { SecondStepGuard } from './auth/second-step.guard.ts';
import { DatabaseModule } from './database/database.module.ts';
import { ChangesModule } from './changes/changes.module.ts';
import { CommonModule } from './common/common.module.ts';
import { ConfigurationModule } from './common/configuration.module.ts';
import { ProblemFilter } from './common/problem.filter.ts';
import { RateLimitGuard } from './common/rate-limit.guard.ts';
import { validationPipe } from './common/validation.pipe.ts';
import { DemoModule } from './demo/demo.module.ts';
import { DocumentsModule } from './documents/documents.module.ts';
import { DrawsModule } from './draws/draws.module.ts';
import { FilesModule } from './files/files.module.ts';
import { FirmsModule } from './firms/firms.module.ts';
import { GuestLinksModule } from './guest-links/guest-links.module.ts';
import { HouseModule } from './house/house.module.ts';
import { HealthModule } from './health/health.module.ts';
import { JobsModule } from './jobs/jobs.module.ts';
import { MilestonesModule } from './milestones/milestones.module.ts';
import { LendingModule } from './lending/lending.module.ts';
import { LoansModule } from './loans/loans.module.ts';
import { MoneyModule } from './money/money.module.ts';
import { LedgerModule } from './ledger/ledger.module.ts';
import { NoticesModule } from './notices/notices.module.ts';
import { PaymentsModule } from './payments/payments.module.ts';
import { PeopleModule } from './people/people.module.ts';
import { PhotosModule } from './photos/photos.module.ts';
import { QueueModule } from './queue/queue.module.ts';
import { RecordModule } from './record/record.module.ts';
import { RecordPagesModule } from './record/record-pages.module.ts';
import { ScheduleOfValuesModule } from './schedule-of-values/schedule-of-values.module.ts';

@Module({
  imports: [ConfigurationModule, DatabaseModule, CommonModule, QueueModule, RecordModule, RecordPagesModule, LedgerModule, NoticesModule, AuthModule, FirmsModule, PeopleModule, JobsModule, FilesModule, ScheduleOfValuesModule, MilestonesModule, GuestLinksModule, PhotosModule, PaymentsModule, LoansModule, DrawsModule, LendingModule, MoneyModule, HouseModule, ChangesModule, DocumentsModule, HealthModule, DemoModule],
  providers: [
    { provide: APP_FILTER, useClass: ProblemFilter },
    { provide: APP_PIPE, useFactory: validationPipe },
    { provide: APP_GUARD, useClass: RateLimitGuard },
    { provide: APP_GUARD, useClass: JwtGuard },
    { provide: APP_GUARD, useClass: SecondStepGuard },
  ],
})
export class AppModule {}
