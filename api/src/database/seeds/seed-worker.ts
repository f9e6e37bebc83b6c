import type { INestApplicationContext } from '@nestjs/common';
import { Logger, runOnce, type JobHelpers, type TaskList } from 'graphile-worker';
import { changeTasks } from '../../changes/change-tasks.ts';
import type { Configuration } from '../../common/configuration.ts';
import { photoTasks } from '../../photos/photo-tasks.ts';

export interface SeedWorker {
  /** Does the waiting work on photos and papers; mails stay in the queue for the real worker. */
  work(): Promise<void>;
  /** Lets a change lapse whose price no longer holds. */
  lapse(job: { firmId: string; jobId: string; changeId: string }): Promise<void>;
}

/** The worker's own tasks, run inside the seed, whose clock stands in the past. */
export function seedWorker(app: INestApplicationContext, { QUEUE_URL }: Configuration): SeedWorker {
  const { lapse_change: lapse, ...papers } = changeTasks(app);
  const taskList: TaskList = { ...photoTasks(app), ...papers };
  const logger = new Logger(() => (level, message) => {
    if ((level as string) === 'error') console.error(message);
  });
  return {
    work: () => runOnce({ connectionString: QUEUE_URL, taskList, logger, noPreparedStatements: true }),
    lapse: async (job) => {
      await lapse?.(job, {} as JobHelpers);
    },
  };
}
