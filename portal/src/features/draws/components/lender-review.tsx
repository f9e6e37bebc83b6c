import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { writtenDate } from '../../../lib/dates.ts';
import { Money } from '../../../ui/money.tsx';
import { Section } from '../../../ui/page.tsx';
import { strings } from '../strings.ts';
import { AllowForm } from './allow-form.tsx';
import { FundForm } from './fund-form.tsx';
import { InspectionForm } from './inspection-form.tsx';
import classes from './draws.module.css';

const words = strings.review;

/** The lender's own part of the page: proof beside each line, then the next step of the review. */
export function LenderReview({ job, draw }: { job: Job; draw: Draw }) {
  const open = draw.state !== 'returned' && draw.state !== 'void';
  return (
    <Section title={words.title}>
      {open && draw.reviewState === 'ordered' ? <InspectionForm job={job} draw={draw} /> : null}
      {open && draw.reviewState === 'inspected' ? <AllowForm job={job} draw={draw} /> : null}
      {open && draw.reviewState === 'allowed' ? <AfterAllowing job={job} draw={draw} /> : null}
      <History draw={draw} />
    </Section>
  );
}

/** Funding is what comes next; what was allowed can still be changed. */
const AfterAllowing = ({ job, draw }: { job: Job; draw: Draw }) => (
  <>
    {draw.approvedAt === null ? <p className="quiet">{words.waitsForApproval}</p> : <FundForm job={job} draw={draw} />}
    <details className={classes['history']}>
      <summary>{words.allowAgain}</summary>
      <AllowForm job={job} draw={draw} />
    </details>
  </>
);

function History({ draw }: { draw: Draw }) {
  if (draw.reviews.length === 0 && draw.fundings.length === 0) return null;
  return (
    <div className={classes['history']}>
      <h3>{words.history}</h3>
      <ul className={classes['plain']}>
        {draw.reviews.map(({ step, onDate, by, note, conditions, at }) => (
          <li key={at}>
            {words.step[step]} {writtenDate(onDate)} by {by}
            {note ? `: ${note}` : ''}
            {conditions ? <div className="quiet">{`${words.conditions}: ${conditions}`}</div> : null}
          </li>
        ))}
        {draw.fundings.map(({ amountCents, fundedOn, reference, by, received }) => (
          <li key={reference}>
            {words.sentMoney} <Money cents={amountCents} /> {writtenDate(fundedOn)} by {by}, {reference} · {received ? words.received : words.onTheWay}
          </li>
        ))}
      </ul>
    </div>
  );
}
