import { TextInput } from '@mantine/core';
import { useState } from 'react';
import { readDate, writtenDate } from '../../../lib/dates.ts';
import type { PlannedMilestone } from '../import-state.ts';
import { strings } from '../strings.ts';
import classes from './schedule.module.css';

interface MilestoneDatesProps {
  milestones: readonly PlannedMilestone[];
  onPlan: (id: string, plannedOn: string | null) => void;
}

/** The milestones in building order, each with the day that is proposed for it. */
export const MilestoneDates = ({ milestones, onPlan }: MilestoneDatesProps) =>
  milestones.length === 0 ? (
    <p className="quiet">{strings.noMilestones}</p>
  ) : (
    <ol className={classes['milestones']}>
      {milestones.map((milestone) => (
        <li key={milestone.id}>
          <span>{milestone.name}</span>
          <DayField milestone={milestone} onPlan={(day) => onPlan(milestone.id, day)} />
        </li>
      ))}
    </ol>
  );

function DayField({ milestone: { name, plannedOn }, onPlan }: { milestone: PlannedMilestone; onPlan: (day: string | null) => void }) {
  const [typed, setTyped] = useState<string | null>(null);
  const [near] = useState(plannedOn ?? new Date().toISOString().slice(0, 10));
  const day = typed === null || typed.trim() === '' ? null : readDate(typed, near);
  return (
    <TextInput
      aria-label={strings.planned(name)}
      value={typed ?? (plannedOn === null ? '' : writtenDate(plannedOn))}
      error={typed !== null && typed.trim() !== '' && day === null ? 'Enter a day such as 3/14 or March 14, 2027.' : null}
      onChange={(event) => {
        const next = event.currentTarget.value;
        setTyped(next);
        const read = next.trim() === '' ? null : readDate(next, near);
        if (read !== null || next.trim() === '') onPlan(read);
      }}
      onBlur={() => day !== null && setTyped(null)}
    />
  );
}
