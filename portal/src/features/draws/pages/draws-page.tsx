import { useQuery } from '@tanstack/react-query';
import { may } from '@tallypole/shared/schemas/permissions';
import { rowSteps } from '@tallypole/shared/draw';
import { sum } from '@tallypole/shared/money';
import type { DrawRow } from '@tallypole/shared/schemas/draws';
import { Link } from 'react-router-dom';
import { writtenDate } from '../../../lib/dates.ts';
import { drawsQuery } from '../../../lib/draws.ts';
import { useJob } from '../../../lib/job.ts';
import { DataTable, type Column } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { DrawTag } from '../../../ui/money-tags.tsx';
import { Money } from '../../../ui/money.tsx';
import { EmptyState, FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { StartDrawForm } from '../components/start-draw-form.tsx';
import { strings } from '../strings.ts';

const { columns: titles } = strings;
const COLUMNS: readonly Column<DrawRow>[] = [
  { key: 'number', head: titles.draw, cell: ({ id, number }) => <Link to={id}>{strings.name(number)}</Link> },
  { key: 'state', head: titles.state, cell: ({ state }) => <DrawTag state={state} /> },
  { key: 'through', head: titles.through, cell: ({ throughOn }) => writtenDate(throughOn) },
  { key: 'due', head: titles.due, right: true, cell: (row) => <Figure steps={rowSteps(row).due} label={`${strings.name(row.number)}, ${titles.due}`}><Money cents={row.dueCents} /></Figure> },
  { key: 'homeowner', head: titles.homeowner, right: true, cell: ({ homeownerCents }) => <Money cents={homeownerCents} /> },
  { key: 'loan', head: titles.loan, right: true, cell: ({ loanCents }) => <Money cents={loanCents} /> },
  { key: 'open', head: titles.open, right: true, cell: (row) => <Figure steps={rowSteps(row).open} label={`${strings.name(row.number)}, ${titles.open}`}><Money cents={sum([row.openHomeownerCents, row.openLoanCents])} /></Figure> },
  { key: 'dueOn', head: titles.dueOn, cell: ({ dueOn }) => (dueOn === null ? '–' : writtenDate(dueOn)) },
];

/** All draws of a job; the firm drafts the next one here. */
export function Component() {
  const job = useJob();
  const { data, error, refetch } = useQuery(drawsQuery(job.id));
  const prepares = may(job.roles, 'draw.prepare');
  const open = data?.items.some(({ state }) => state === 'draft' || state === 'submitted' || state === 'returned') ?? true;
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      {error ? <FailureState error={error} onRetry={() => void refetch()} /> : null}
      {!data && !error ? <LoadingState /> : null}
      {data && data.items.length === 0 ? <EmptyState>{prepares ? strings.noneForFirm : strings.none}</EmptyState> : null}
      {data && data.items.length > 0 ? <DataTable caption={strings.title} columns={COLUMNS} rows={data.items} rowKey={({ id }) => id} /> : null}
      {data && prepares && !open ? (
        <Section title={strings.draft} ruled={data.items.length > 0}>
          <StartDrawForm job={job} />
        </Section>
      ) : null}
    </>
  );
}
