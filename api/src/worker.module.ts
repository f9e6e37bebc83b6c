import { Module } from '@nestjs/common';
import { SequelizeModule } from '@nestjs/sequelize';
import { ChangePapersModule } from './changes/changes.module.ts';
import { CommonModule } from './common/common.module.ts';
import { CONFIGURATION, type Configuration } from './common/configuration.ts';
import { ConfigurationModule } from './common/configuration.module.ts';
import { connectionOptions } from './database/connection.ts';
import { models } from './database/models.ts';
import { StorageModule } from './files/files.module.ts';
import { LedgerModule } from './ledger/ledger.module.ts';
import { NoticesModule } from './notices/notices.module.ts';
import { SettlementModule } from './payments/settlement.module.ts';
import { QueueModule } from './queue/queue.module.ts';
import { RecordModule } from './record/record.module.ts';

const workerConnection = (name?: string) =>
  SequelizeModule.forRootAsync({
    ...(name ? { name } : {}),
    inject: [CONFIGURATION],
    useFactory: (configuration: Configuration) => ({
      ...(name ? { name } : { models }),
      ...connectionOptions(configuration.DATABASE_WORKER_URL, configuration.DATABASE_POOL, 'write'),
    }),
  });

/** The same parts as the web process, on the worker's own role. */
@Module({ imports: [ConfigurationModule, workerConnection(), workerConnection('read'), CommonModule, QueueModule, RecordModule, LedgerModule, NoticesModule, StorageModule, SettlementModule, ChangePapersModule] })
export class WorkerModule {}
