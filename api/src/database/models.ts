import { JobModel } from '../jobs/job.model.ts';

/** Models live on the writing connection; reads hand them the reading pool's transaction. */
export const models = [JobModel];
