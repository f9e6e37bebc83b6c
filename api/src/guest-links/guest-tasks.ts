import type { INestApplicationContext } from '@nestjs/common';
import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { UnitOfWork } from '../common/unit-of-work.ts';
import type { Mailer } from '../notices/mailer.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { sendGuestCode, sendGuestLink, sweepGuests } from './send-guest.repository.ts';
import { tellGuestInspection } from './tell-inspection.repository.ts';

const LinkJob = z.object({ linkId: z.uuid(), firmId: z.uuid() });
const CodeJob = z.object({ codeId: z.uuid() });
const TellJob = z.object({ inspectionId: z.uuid(), firmId: z.uuid(), inside: z.array(z.uuid()) });

export function guestTasks(app: INestApplicationContext, mailer: Mailer): TaskList {
  const work = app.get(UnitOfWork);
  const { CODE_SECRET: secret, PUBLIC_URL: publicUrl } = app.get<Configuration>(CONFIGURATION);
  return {
    send_guest_link: (payload) => sendGuestLink(work, mailer, { secret, publicUrl }, LinkJob.parse(payload)),
    send_guest_code: (payload) => sendGuestCode(work, mailer, { secret, publicUrl }, CodeJob.parse(payload).codeId),
    sweep_guests: () => sweepGuests(work),
    tell_guest_inspection: (payload) => tellGuestInspection(work, app.get(NoticeRepository), publicUrl, TellJob.parse(payload)),
  };
}
