import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import { run } from 'graphile-worker';
import { readConfiguration } from './common/configuration.ts';
import { leaveWithParent } from './common/leave-with-parent.ts';
import { PinoLogger, rootLogger } from './common/logging.ts';
import { startOrExplain } from './common/start-or-explain.ts';
import { Mailer } from './notices/mailer.ts';
import { queueLogger } from './queue/queue-log.ts';
import { DeadWorkerSweep } from './queue/sweep.ts';
import { tasks } from './queue/tasks.ts';
import { WorkerModule } from './worker.module.ts';

await startOrExplain(async () => {
  const configuration = readConfiguration(process.env);
  const logger = rootLogger(configuration.LOG_LEVEL);
  const app = await NestFactory.createApplicationContext(WorkerModule, { logger: new PinoLogger(logger), abortOnError: false });
  const mailer = new Mailer(configuration.SMTP_URL, configuration.MAIL_FROM);
  const sweep = new DeadWorkerSweep(configuration.QUEUE_URL);
  const runner = await run({
    connectionString: configuration.QUEUE_URL,
    concurrency: 4,
    pollInterval: 1_000,
    noHandleSignals: true,
    // old limits and answered keys go once a day; what Stripe did without our hearing of it is asked for each minute
    crontab: '20 3 * * * sweep_old ?fill=1d\n40 3 * * * sweep_guests ?fill=1d\n50 3 * * * sweep_sign_in ?fill=1d\n* * * * * sweep_payments',
    events: sweep.events,
    taskList: tasks(app, mailer),
    logger: queueLogger(logger),
  });
  await sweep.start((error) => logger.error({ err: error }, 'sweep'));
  let leaving = false;
  const leave = async () => {
    if (leaving) return;
    leaving = true;
    await runner.stop();
    await sweep.close();
    mailer.close();
    await app.close();
  };
  for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => void leave().finally(() => process.exit(0)));
  leaveWithParent(leave);
  process.send?.('ready');
});
