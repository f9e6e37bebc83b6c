import { addCalendarDays, dueDate } from '@tallypole/shared/due';
import { businessDate } from '../common/clock.ts';
import type { DrawFacts } from './draw-facts.ts';

/**
 * When a draw approved on a day is due. The clock starts with the approval, but no later than the end of the review period: nothing is
 * approved by silence, yet a late answer does not move the payment.
 */
export function dueOnOf(job: Pick<DrawFacts['job'], 'reviewDays' | 'paymentDays' | 'timeZone'>, submittedAt: string | null, approvedOn: string): string {
  const reviewEnds = submittedAt === null ? approvedOn : addCalendarDays(businessDate(new Date(submittedAt), job.timeZone), job.reviewDays);
  const startedOn = reviewEnds < approvedOn ? reviewEnds : approvedOn;
  return dueDate({ startsAt: 'approval', days: job.paymentDays, dayKind: 'calendar', moveToBusinessDay: true, calendar: 'bank' }, startedOn).dueOn;
}
