import { may } from '@tallypole/shared/schemas/permissions';
import { mayDraw } from '@tallypole/shared/schemas/draw-states';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { lazy, Suspense } from 'react';
import { LoadingState, Section } from '../../../ui/page.tsx';
import { strings } from '../strings.ts';
import { AskedLines } from './asked-lines.tsx';
import { ApproveDraw } from './approve-draw.tsx';
import { BuiltPhotos } from './built-photos.tsx';
import { DrawHead } from './draw-head.tsx';
import { DrawPayments } from './draw-payments.tsx';
import { DrawSummary } from './draw-summary.tsx';
import { PayPart } from './pay-part.tsx';
import { ReturnForm } from './return-form.tsx';
import classes from './draws.module.css';

// what only the lender or the firm does
const LenderReview = lazy(() => import('./lender-review.tsx').then((module) => ({ default: module.LenderReview })));
const VoidForm = lazy(() => import('./office-acts.tsx').then((module) => ({ default: module.VoidForm })));

/** A draw that was sent: what was built, what is asked, what stays held, what is due from whom, and what the reader can do. */
export function DrawView({ job, draw }: { job: Job; draw: Draw }) {
  const homeowner = may(job.roles, 'draw.approve');
  const lender = may(job.roles, 'draw.fund');
  const decides = homeowner && mayDraw(draw.state, 'approve');
  return (
    <>
      <DrawHead draw={draw} />
      {decides && !draw.approvedByMe ? <p className={classes['lead']}>{strings.approve.lead(draw.dueCents, draw.homeownerCents)}</p> : null}
      {homeowner ? <PayPart job={job} draw={draw} /> : null}
      <div className={lender ? classes['wide'] : classes['page']}>
        <div>
          <Section title={strings.photos.built} ruled={false}>
            <BuiltPhotos job={job} draw={draw} />
          </Section>
          {lender ? (
            <Suspense fallback={<LoadingState />}>
              <LenderReview job={job} draw={draw} />
            </Suspense>
          ) : null}
          <Section title={strings.asked}>
            <AskedLines job={job} draw={draw} objects={decides} />
          </Section>
        </div>
        <div className={classes['side']}>
          <DrawSummary draw={draw} forHomeowner={homeowner} />
        </div>
      </div>
      {decides ? <ApproveDraw job={job} draw={draw} /> : <Approvals draw={draw} />}
      {decides ? (
        <Section title={strings.back.title}>
          <ReturnForm jobId={job.id} draw={draw} />
        </Section>
      ) : null}
      <DrawPayments draw={draw} />
      {may(job.roles, 'draw.prepare') && mayDraw(draw.state, 'void') ? (
        <Suspense fallback={null}>
          <VoidForm jobId={job.id} draw={draw} />
        </Suspense>
      ) : null}
    </>
  );
}

function Approvals({ draw }: { draw: Draw }) {
  if (draw.approvals.length === 0 && draw.awaited.length === 0) return null;
  return (
    <Section title={strings.approve.who}>
      <p>{draw.approvals.length === 0 ? '–' : draw.approvals.map(({ name }) => name).join(', ')}</p>
      {draw.awaited.length > 0 ? <p className="quiet">{strings.approve.waits(draw.awaited.map(({ name }) => name).join(' and '))}</p> : null}
      {draw.state === 'submitted' && draw.invitedHomeowners > 0 ? <p className="quiet">{strings.approve.invited(draw.invitedHomeowners)}</p> : null}
    </Section>
  );
}
