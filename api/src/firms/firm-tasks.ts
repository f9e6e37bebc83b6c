import type { INestApplicationContext } from '@nestjs/common';
import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { UnitOfWork } from '../common/unit-of-work.ts';
import { renderLogo } from './render-logo.repository.ts';

const LogoJob = z.object({ firmId: z.uuid() });

export const firmTasks = (app: INestApplicationContext): TaskList => ({
  render_logo: (payload) => renderLogo(app.get(UnitOfWork), LogoJob.parse(payload).firmId),
});
