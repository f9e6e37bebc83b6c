import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import { NEXT_DRAW } from '../draws/next-draw.repository.ts';
import type { NextDrawFacts } from '../draws/next-draw.ts';

export interface AheadFacts {
  timeZone: string;
  dayKind: 'calendar' | 'working';
  daysApproved: number;
  reviewDays: number;
  paymentDays: number;
  next: NextDrawFacts;
  /** When each milestone is expected, by its id; null where no day is planned. */
  expected: { id: string; name: string; on: string | null }[];
  /** Changes that are out and not signed by all. */
  issued: { id: string; label: string; cents: number; milestoneId: string | null }[];
}

@Injectable()
export class AheadRepository {
  async facts(tx: Tx, jobId: string): Promise<AheadFacts | undefined> {
    return (await tx.one<{ facts: AheadFacts }>(FACTS, [jobId]))?.facts;
  }
}

const FACTS = /* sql */ `
  select json_build_object('timeZone', j.time_zone, 'dayKind', j.day_kind, 'daysApproved', j.days_approved, 'reviewDays', j.review_days, 'paymentDays', j.payment_days,
    'next', ${NEXT_DRAW},
    'expected', (select coalesce(json_agg(json_build_object('id', m.id, 'name', m.name,
        'on', coalesce((m.proven_at at time zone j.time_zone)::date, m.forecast_on, m.planned_on)) order by m.position), '[]') from milestone m where m.job_id = j.id),
    'issued', (select coalesce(json_agg(json_build_object('id', c.id, 'label', 'Change ' || c.number || c.revision || ': ' || c.title, 'cents', c.charged_cents,
        'milestoneId', c.milestone_id) order by c.number), '[]') from change c where c.job_id = j.id and c.state in ('issued', 'partly_signed'))) as facts
  from job j where j.id = $1`;
