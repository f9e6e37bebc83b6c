import type { Draw } from '@tallypole/shared/schemas/draws';
import { writtenDate } from '../../../lib/dates.ts';
import { DrawTag, ReviewTag } from '../../../ui/money-tags.tsx';
import { PageHead } from '../../../ui/page.tsx';
import { strings } from '../strings.ts';
import classes from './draws.module.css';

export const DrawHead = ({ draw }: { draw: Draw }) => (
  <PageHead title={strings.name(draw.number)}>
    <div className={classes['head']}>
      <DrawTag state={draw.state} />
      {draw.submittedAt === null || draw.reviewState === 'not_needed' ? null : <ReviewTag state={draw.reviewState} />}
      <span className="quiet">
        work through {writtenDate(draw.throughOn)}
        {draw.dueOn === null ? '' : ` · due ${writtenDate(draw.dueOn, true)}`}
      </span>
    </div>
  </PageHead>
);
