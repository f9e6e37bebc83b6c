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
      {inspections.map(({ id, result, percent, by, role, seenOn, note, independent, guest }) => (
        <li key={id}>
          <div>
            <StateTag meaning={independent || result === 'failed' ? MEANING[result] : 'neutral'}>{strings.inspected[result]}</StateTag> {formatRate(percent)} · {writtenDate(seenOn)} · {by.name}
            {guest ? lookedByLink(guest) : `, ${role}`}
          </div>
          {note ? <p>{note}</p> : null}
          {independent || result === 'failed' ? null : <div className="quiet">{strings.noProof}</div>}
        </li>
      ))}
    </ul>
  );

/** Who came without an account: from where, for whom, and who sent them. */
function lookedByLink({ company, license, onBehalf, senderSide }: NonNullable<Inspection['guest']>): string {
  const from = [company, license].filter((part) => part).join(', ');
  return `${from ? `, ${from}` : ''}: ${strings.byLink[onBehalf]}, ${strings.linkBy[senderSide]}`;
}
