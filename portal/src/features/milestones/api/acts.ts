import type { ClaimMilestone, Inspect, MilestoneDetail, PlanMilestone, ReopenMilestone, StartMilestone } from '@tallypole/shared/schemas/milestones';
import { post } from '../../../lib/http.ts';

interface Bodies {
  plan: PlanMilestone;
  start: StartMilestone;
  claim: ClaimMilestone;
  inspections: Inspect;
  reopen: ReopenMilestone;
}

/** Acts on a milestone; each answers with what it is afterwards. */
export const actOnMilestone = <Act extends keyof Bodies>(jobId: string, milestoneId: string, act: Act, body: Bodies[Act], idempotencyKey: string): Promise<MilestoneDetail> =>
  post<MilestoneDetail>(`jobs/${jobId}/milestones/${milestoneId}/${act}`, body, { idempotencyKey });
