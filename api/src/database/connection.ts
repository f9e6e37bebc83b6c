import pg from 'pg';
import type { SequelizeModuleOptions } from '@nestjs/sequelize';
import { PreparingClient, ReadingClient } from './preparing-client.ts';

const INT8 = 20;
// bigint columns hold cents and sequence numbers: give numbers, and refuse what a number can't hold exactly
pg.types.setTypeParser(INT8, (text) => {
  const value = Number(text);
  if (!Number.isSafeInteger(value)) throw new RangeError(`bigint out of range: ${text}`);
  return value;
});
const DATE = 1082;
// a business date stays the text YYYY-MM-DD from end to end
pg.types.setTypeParser(DATE, (text) => text);

/** Sequelize's options for one of the two pools. */
export function connectionOptions(url: string, poolSize: number, pool: 'read' | 'write'): SequelizeModuleOptions {
  const { hostname, port, username, password, pathname } = new URL(url);
  return {
    dialect: 'postgres',
    dialectModule: { ...pg, Client: pool === 'read' ? ReadingClient : PreparingClient },
    host: hostname,
    port: Number(port || 5432),
    username: decodeURIComponent(username),
    password: decodeURIComponent(password),
    database: pathname.slice(1),
    logging: false,
    // a server that vanished without a word must not keep anybody waiting: a little longer than it gives a statement itself
    dialectOptions: { connectionTimeoutMillis: 5_000, query_timeout: 12_000, keepAlive: true, keepAliveInitialDelayMillis: 10_000 },
    pool: { max: poolSize, idle: 10_000, acquire: 8_000 },
    define: { underscored: true, timestamps: false },
    autoLoadModels: false,
    synchronize: false,
    retryAttempts: 2,
    retryDelay: 300,
  };
}
