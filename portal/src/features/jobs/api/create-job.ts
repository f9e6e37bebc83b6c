import type { CreateJob, Job } from '@tallypole/shared/schemas/jobs';
import { post } from '../../../lib/http.ts';

export const createJob = (input: CreateJob, idempotencyKey: string): Promise<Job> => post('jobs', input, { idempotencyKey });
