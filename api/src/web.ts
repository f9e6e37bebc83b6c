import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { AppModule } from './app.module.ts';
import { configure } from './application.ts';
import { readConfiguration } from './common/configuration.ts';
import { PinoLogger, rootLogger } from './common/logging.ts';
import { leaveWithParent } from './common/leave-with-parent.ts';
import { startOrExplain } from './common/start-or-explain.ts';

await startOrExplain(async () => {
  const configuration = readConfiguration(process.env);
  const logger = rootLogger(configuration.LOG_LEVEL);
  const app = await NestFactory.create<NestExpressApplication>(AppModule, { logger: new PinoLogger(logger), rawBody: true, forceCloseConnections: true, abortOnError: false });
  configure(app, configuration, logger);
  await app.listen(configuration.PORT, '127.0.0.1');
  leaveWithParent(() => app.close());
});
