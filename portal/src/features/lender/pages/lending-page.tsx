import { useQuery } from '@tanstack/react-query';
import { fundableSteps, loanOpenSteps, type LoanOpenFigures } from '@tallypole/shared/funding';
import { formatMoney } from '@tallypole/shared/money';
import type { LendingRow } from '@tallypole/shared/schemas/lending';
import { writtenDate } from '../../../lib/dates.ts';
import { Figure } from '../../../ui/figure.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { ReviewTag } from '../../../ui/money-tags.tsx';
import { Money } from '../../../ui/money.tsx';
import { ActRow, EmptyState, FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { lendingQuery } from '../api/lending.ts';
import { strings } from '../strings.ts';

/** The lender's queue over all jobs. */
export function Component() {
  const { data, error, refetch } = useQuery(lendingQuery);
  return (
    <main id="main" tabIndex={-1} style={{ maxWidth: 960, margin: '0 auto', padding: '36px 16px' }}>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      {error && !data ? <FailureState error={error} onRetry={() => void refetch()} /> : null}
      {data ? <Queue items={data.items} /> : error ? null : <LoadingState />}
    </main>
  );
}

function Queue({ items }: { items: LendingRow[] }) {
  if (items.length === 0) return <EmptyState>{strings.none}</EmptyState>;
  const today = items.filter(({ blocker }) => blocker === null);
  const later = items.filter(({ blocker }) => blocker !== null);
  return (
    <>
      <Section title={strings.today} ruled={false}>
        <p className="quiet">{today.length === 0 ? strings.noneToday : <Total rows={today} />}</p>
        {today.map((row) => <Row key={row.drawId} row={row} />)}
      </Section>
      {later.length === 0 ? null : (
        <Section title={strings.later} ruled={false}>
          {later.map((row) => <Row key={row.drawId} row={row} />)}
        </Section>
      )}
    </>
  );
}

const asked = ({ drawId, number, jobName, loanCents, sentCents }: LendingRow): LoanOpenFigures => ({ drawId, label: `Draw ${number}, ${jobName}`, loanCents, sentCents });

function Total({ rows }: { rows: readonly LendingRow[] }) {
  const steps = fundableSteps(rows.map(asked));
  return (
    <>
      <Figure label={strings.today} steps={steps}><Money cents={steps.result.kind === 'money' ? steps.result.cents : null} /></Figure> {strings.inAll}
    </>
  );
}

function Row({ row }: { row: LendingRow }) {
  const { jobId, drawId, number, jobName, firmName, dueOn, loanOpenCents, blocker } = row;
  return (
    <ActRow
      tag={blocker === null ? <StateTag meaning="settled">{dueOn === null ? strings.today : strings.due(writtenDate(dueOn, true))}</StateTag> : <ReviewTag state={row.reviewState} />}
      title={`Draw ${number}, ${jobName}`}
      sum={<Figure label={`Draw ${number}, ${jobName}`} steps={loanOpenSteps(asked(row))}><Money cents={loanOpenCents} /></Figure>}
      action={
        <LinkButton to={`/jobs/${jobId}/draws/${drawId}`} variant={blocker === null ? 'filled' : 'outline'}>
          {blocker === null ? strings.fund(loanOpenCents) : strings.open}
        </LinkButton>
      }
    >
      {firmName} · {strings.seen} {formatMoney(row.provenCents)} · {strings.billed} {formatMoney(row.billedCents)} · {strings.photos(row.photos)}
      {blocker === null ? null : <p style={{ color: 'var(--graphite)', marginTop: 4 }}>{strings.blocker(row)}</p>}
    </ActRow>
  );
}
