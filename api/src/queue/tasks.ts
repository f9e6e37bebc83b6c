import { Logger, type INestApplicationContext } from '@nestjs/common';
import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { authTasks } from '../auth/auth-tasks.ts';
import { changeTasks } from '../changes/change-tasks.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { UnitOfWork } from '../common/unit-of-work.ts';
import { FILE_STORAGE, type FileStorage } from '../files/file-storage.ts';
import { firmTasks } from '../firms/firm-tasks.ts';
import { guestTasks } from '../guest-links/guest-tasks.ts';
import type { Mailer } from '../notices/mailer.ts';
import { sendNotice } from '../notices/send-notice.repository.ts';
import { sweepOld } from '../operation/sweep-old.repository.ts';
import { paymentTasks } from '../payments/payment-tasks.ts';
import { photoTasks } from '../photos/photo-tasks.ts';

const NoticeJob = z.object({ noticeId: z.uuid(), firmId: z.uuid() });

/** Every kind of work that the worker knows. Each may run twice and must then do nothing more. */
export function tasks(app: INestApplicationContext, mailer: Mailer): TaskList {
  const work = app.get(UnitOfWork);
  const configuration = app.get<Configuration>(CONFIGURATION);
  return {
    ...authTasks(app, mailer),
    ...paymentTasks(app),
    ...photoTasks(app),
    ...changeTasks(app),
    ...firmTasks(app),
    ...guestTasks(app, mailer),
    send_notice: (payload) => sendNotice(work, mailer, { publicUrl: configuration.PUBLIC_URL, storage: app.get<FileStorage>(FILE_STORAGE) }, NoticeJob.parse(payload)),
    sweep_old: () => sweepOld(work, new Logger('sweep')),
  };
}
