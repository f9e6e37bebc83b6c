// Fills an empty database with the demo, through the same acts that people use; does nothing where there is a firm already.
import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import { AppModule } from '../app.module.ts';
import { startOrExplain } from '../common/start-or-explain.ts';
import { seedDemo } from './seeds/demo.ts';
import { SeedPeople } from './seeds/seed-people.ts';

await startOrExplain(async () => {
  const app = await NestFactory.createApplicationContext(AppModule, { logger: ['error'], abortOnError: false });
  const people = await SeedPeople.connect(app);
  try {
    if (await people.databaseIsEmpty()) {
      await seedDemo(app, people);
      console.log('The demo data is in place.');
    }
  } finally {
    await people.close();
    await app.close();
  }
});
