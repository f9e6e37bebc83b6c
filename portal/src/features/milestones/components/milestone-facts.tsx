import { formatRate } from '@tallypole/shared/money';
import type { MilestoneDetail } from '@tallypole/shared/schemas/milestones';
import type { ReactNode } from 'react';
import { writtenDate, writtenInstant } from '../../../lib/dates.ts';
import { Money } from '../../../ui/money.tsx';
import { strings } from '../strings.ts';
import classes from './milestone.module.css';

const { facts } = strings;

/** Its days, who said what, and its sum for whoever may see sums. */
export function MilestoneFacts({ milestone, timeZone }: { milestone: MilestoneDetail; timeZone: string }) {
  const { plannedOn, forecastOn, claimedAt, claimedBy, provenAt, provenBy, percent, scheduledCents } = milestone;
  const day = (date: string | null) => (date === null ? strings.none : writtenDate(date));
  return (
    <dl className={classes['facts']}>
      <Fact name={facts.planned}>{day(plannedOn)}</Fact>
      {forecastOn !== null && forecastOn !== plannedOn ? <Fact name={facts.forecast}>{day(forecastOn)}</Fact> : null}
      {claimedAt && claimedBy ? <Fact name={facts.claimed}>{strings.by(writtenInstant(claimedAt, timeZone), claimedBy.name)}</Fact> : null}
      {provenAt && provenBy ? <Fact name={facts.proven}>{strings.by(writtenInstant(provenAt, timeZone), provenBy.name)}</Fact> : null}
      <Fact name={facts.percent}>{formatRate(percent)}</Fact>
      {scheduledCents === null ? null : <Fact name={facts.scheduled}><Money cents={scheduledCents} /></Fact>}
    </dl>
  );
}

const Fact = ({ name, children }: { name: string; children: ReactNode }) => (
  <div>
    <dt>{name}</dt>
    <dd>{children}</dd>
  </div>
);
