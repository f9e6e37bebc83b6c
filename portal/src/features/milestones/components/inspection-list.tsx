import { formatRate } from '@tallypole/shared/money';
import type { Inspection } from '@tallypole/shared/schemas/milestones';
import { writtenDate } from '../../../lib/dates.ts';
import { StateTag } from '../../../ui/state-tag.tsx';
import { strings } from '../strings.ts';
import classes from './milestone.module.css';

const MEANING = { passed: 'settled', partial: 'neutral', failed: 'refused' } as const;

/** Who from outside the firm looked at it, newest first. */
export const InspectionList = ({ inspections }: { inspections: readonly Inspection[] }) =>
  inspections.length === 0 ? (
    <p className="quiet">{strings.noLooks}</p>
  ) : (
    <ul className={classes['looks']}>
      {inspections.map(({ id, result, percent, by, role, seenOn, note }) => (
        <li key={id}>
          <div>
            <StateTag meaning={MEANING[result]}>{strings.inspected[result]}</StateTag> {formatRate(percent)} · {writtenDate(seenOn)} · {by.name}, {role}
          </div>
          {note ? <p>{note}</p> : null}
        </li>
      ))}
    </ul>
  );
