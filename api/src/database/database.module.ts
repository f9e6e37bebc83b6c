import { Module } from '@nestjs/common';
import { SequelizeModule } from '@nestjs/sequelize';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { connectionOptions } from './connection.ts';
import { models } from './models.ts';

/** Two pools: `app_write` for commands, `app_read` (read-only, repeatable read by its role) for every GET. */
@Module({
  imports: [
    SequelizeModule.forRootAsync({
      inject: [CONFIGURATION],
      useFactory: (configuration: Configuration) => ({ ...connectionOptions(configuration.DATABASE_WRITE_URL, configuration.DATABASE_POOL, 'write'), models }),
    }),
    SequelizeModule.forRootAsync({
      name: 'read',
      inject: [CONFIGURATION],
      useFactory: (configuration: Configuration) => ({ name: 'read', ...connectionOptions(configuration.DATABASE_READ_URL, configuration.DATABASE_POOL, 'read') }),
    }),
  ],
})
export class DatabaseModule {}
