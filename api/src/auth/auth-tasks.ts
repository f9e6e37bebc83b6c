import type { INestApplicationContext } from '@nestjs/common';
import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { UnitOfWork } from '../common/unit-of-work.ts';
import type { Mailer } from '../notices/mailer.ts';
import { sendAccountNotice, sendAddressCode, tellAddressChanged } from './send-address.repository.ts';
import { sendCode } from './send-code.repository.ts';
import { sweepSignIn } from './sweep-sign-in.repository.ts';

const CodeJob = z.object({ codeId: z.uuid() });
const ChangeJob = z.object({ changeId: z.uuid() });
const NoticeJob = z.object({ noticeId: z.uuid() });

export function authTasks(app: INestApplicationContext, mailer: Mailer): TaskList {
  const work = app.get(UnitOfWork);
  const { CODE_SECRET: secret, PUBLIC_URL: publicUrl } = app.get<Configuration>(CONFIGURATION);
  return {
    send_code: (payload) => sendCode(work, mailer, { secret, publicUrl }, CodeJob.parse(payload).codeId),
    send_address_code: (payload) => sendAddressCode(work, mailer, { secret, publicUrl }, ChangeJob.parse(payload).changeId),
    tell_address_changed: (payload) => tellAddressChanged(work, mailer, publicUrl, ChangeJob.parse(payload).changeId),
    send_account_notice: (payload) => sendAccountNotice(work, mailer, publicUrl, NoticeJob.parse(payload).noticeId),
    sweep_sign_in: () => sweepSignIn(work),
  };
}
