import { Global, Module } from '@nestjs/common';
import { CommandRunner } from './command-runner.ts';
import { UnitOfWork } from './unit-of-work.ts';

@Global()
@Module({ providers: [UnitOfWork, CommandRunner], exports: [UnitOfWork, CommandRunner] })
export class CommonModule {}
