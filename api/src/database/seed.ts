// Fills an empty database with the demo, through the same acts that people use; does nothing where there is a firm already.
import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { AppModule } from '../app.module.ts';
import { configure } from '../application.ts';
import { readConfiguration } from '../common/configuration.ts';
import { rootLogger } from '../common/logging.ts';
import { startOrExplain } from '../common/start-or-explain.ts';
import { WorkerModule } from '../worker.module.ts';
import { seedDemo } from './seeds/demo.ts';
import { SeedPeople } from './seeds/seed-people.ts';
import { seedWorker } from './seeds/seed-worker.ts';

await startOrExplain(async () => {
  const configuration = readConfiguration(process.env);
  if (configuration.NODE_ENV === 'production') throw new Error('The demo data does not belong into production.');
  const app = await NestFactory.create<NestExpressApplication>(AppModule, { logger: ['error'], abortOnError: false, rawBody: true });
  configure(app, { ...configuration, NODE_ENV: 'production' }, rootLogger('error'));
  await app.listen(0, '127.0.0.1');
  const worker = await NestFactory.createApplicationContext(WorkerModule, { logger: ['error'], abortOnError: false });
  const people = await SeedPeople.connect(app, worker, await app.getUrl());
  try {
    if (await people.databaseIsEmpty()) {
      await seedDemo(people, seedWorker(worker, configuration));
      console.log('The demo data is in place.');
    }
  } finally {
    await people.close();
    await worker.close();
    await app.close();
  }
});
