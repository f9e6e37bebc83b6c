import { useSuspenseQuery } from '@tanstack/react-query';
import type { Change } from '@tallypole/shared/schemas/changes';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { mayChange } from '@tallypole/shared/schemas/change-states';
import { may } from '@tallypole/shared/schemas/permissions';
import { useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import { writtenDate } from '../../../lib/dates.ts';
import { useJob } from '../../../lib/job.ts';
import { Note, PageHead, Section } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { changeQuery, isOut } from '../api/changes.ts';
import { CostView } from '../components/cost-view.tsx';
import { Decide } from '../components/decide.tsx';
import { EffectView } from '../components/effect-view.tsx';
import { FirmActs } from '../components/firm-acts.tsx';
import { ReviewForm } from '../components/review-form.tsx';
import { ReviewList } from '../components/review-list.tsx';
import { ScopeList } from '../components/scope-list.tsx';
import { Differs } from '../components/differs.tsx';
import { Pictures } from '../components/pictures.tsx';
import { Papers } from '../components/papers.tsx';
import { changeName, dayCount, forSite, states, strings } from '../strings.ts';

/** One change: the reason, what differs, the whole effect, and what can be done about it by whoever reads it. */
export function Component() {
  const job = useJob();
  const { changeId = '' } = useParams();
  const { data: change } = useSuspenseQuery(changeQuery(job.id, changeId));
  const prices = change.chargedCents !== null;
  const { moved, onMoved } = useMoved(change);
  return (
    <article>
      {moved ? (
        <div role="alert" style={{ marginBottom: 16 }}>
          <Note>{moved}</Note>
        </div>
      ) : null}
      <State change={change} prices={prices} />
      <PageHead title={`${changeName(change)}: ${change.title}`}>
        {prices ? null : <p className="quiet">{dayCount(change.days)}</p>}
      </PageHead>
      <p style={{ whiteSpace: 'pre-line', maxWidth: '68ch' }}>{change.reason}</p>
      <Pictures jobId={job.id} change={change} />
      {change.supersededBy ? (
        <p>
          <Link to={`../changes/${change.supersededBy.id}`}>Revision {change.supersededBy.revision} has taken its place.</Link>
        </p>
      ) : null}
      {change.closedReason ? <Note>{change.closedReason}</Note> : null}
      {prices && change.presentation === 'itemized' ? null : <ScopeList scope={change.scope} />}
      {prices ? <Differs change={change} /> : null}
      {change.effect && (isOut(change) || change.state === 'approved' || change.cost) ? <EffectView change={change} effect={change.effect} mine={may(job.roles, 'change.decide')} /> : null}
      {change.structural ? <Structure job={job} change={change} /> : null}
      {change.cost ? <CostView cost={change.cost} /> : null}
      <Papers jobId={job.id} change={change} timeZone={job.timeZone} />
      {isOut(change) && may(job.roles, 'change.decide') ? <Decide job={job} change={change} onMoved={onMoved} /> : null}
      {change.structural && may(job.roles, 'change.review') && mayChange(change.state, 'review') ? <Attach job={job} change={change} /> : null}
      {may(job.roles, 'change.price') ? <FirmActs job={job} change={change} /> : null}
    </article>
  );
}

/** What signing does may move under an open page: by another signature, or by a revision. The page says so, in the server's words where it has them. */
function useMoved(change: Change) {
  const [opened] = useState(change.effectHash);
  const [said, onMoved] = useState<string | null>(null);
  const differs = opened !== null && change.effectHash !== null && change.effectHash !== opened && isOut(change);
  return { moved: said ?? (differs ? strings.changed : null), onMoved };
}

const Attach = ({ job, change }: { job: Job; change: Change }) => (
  <Section title="Attach a review">
    <ReviewForm job={job} change={change} key={change.reviews.length} />
  </Section>
);

function State({ change, prices }: { change: Change; prices: boolean }) {
  const { words, meaning } = prices ? states[change.state] : forSite(change.state);
  const by = prices && isOut(change) ? ` · decide by ${writtenDate(change.goodUntil, true)}` : '';
  return (
    <p style={{ marginBottom: 10 }}>
      <StateTag meaning={meaning}>
        {words}
        {by}
      </StateTag>
    </p>
  );
}

const Structure = ({ job, change }: { job: Job; change: Change }) => (
  <div style={{ margin: '16px 0', display: 'grid', gap: 8 }}>
    <Note>{strings.caution}</Note>
    <ReviewList jobId={job.id} reviews={change.reviews} />
  </div>
);
