import type { Job } from '@tallypole/shared/schemas/jobs';
import type { MilestoneDetail } from '@tallypole/shared/schemas/milestones';

export interface ActProps {
  job: Job;
  milestone: MilestoneDetail;
}

/** Names a form of this milestone as it is now: after an act on it another form begins. */
export const formName = (act: string, { milestone }: ActProps): string => `${act}:${milestone.id}:${milestone.version}`;
