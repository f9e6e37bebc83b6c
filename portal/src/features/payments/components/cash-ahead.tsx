import { useQuery } from '@tanstack/react-query';
import type { JobCashAhead } from '@tallypole/shared/schemas/money';
import { formatChange } from '@tallypole/shared/money';
import { writtenMonth } from '../../../lib/dates.ts';
import { DataTable, type Column } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { FailureState, LoadingState, Section } from '../../../ui/page.tsx';
import { aheadQuery } from '../api/payments.ts';
import { strings } from '../strings.ts';

const words = strings.ahead;
type Ahead = NonNullable<JobCashAhead['ahead']>;
type Month = Ahead['months'][number];

/** What has still to be paid, month by month, and from where; every sum opens. */
export function CashAhead({ jobId }: { jobId: string }) {
  const { data, error, refetch } = useQuery(aheadQuery(jobId));
  if (error && !data) return <Section title={words.title}><FailureState error={error} onRetry={() => void refetch()} /></Section>;
  if (!data) return <Section title={words.title}><LoadingState lines={4} /></Section>;
  if (!data.ahead || data.ahead.months.length === 0) return null;
  return (
    <Section title={words.title}>
      <p className="quiet">{words.explain}</p>
      <Months ahead={data.ahead} />
    </Section>
  );
}

function Months({ ahead }: { ahead: Ahead }) {
  const has = (wanted: (month: Month) => number) => ahead.months.some((month) => wanted(month) !== 0);
  const sum = (key: 'homeownerCents' | 'loanCents' | 'notFundedCents' | 'runningCents', head: string): Column<Month> => ({ key, head, right: true, cell: (month) => <Money cents={month[key]} /> });
  const columns: Column<Month>[] = [
    { key: 'month', head: words.month, cell: ({ month }) => writtenMonth(month) },
    { key: 'total', head: words.total, right: true, cell: ({ totalCents, steps, month }) => <Figure steps={steps} label={writtenMonth(month)}><Money cents={totalCents} /></Figure> },
    sum('homeownerCents', words.homeowner),
    ...(has(({ loanCents }) => loanCents) ? [sum('loanCents', words.loan)] : []),
    ...(has(({ notFundedCents }) => notFundedCents) ? [sum('notFundedCents', words.notFunded)] : []),
    sum('runningCents', words.running),
    ...(has(({ issuedCents }) => issuedCents) ? [{ key: 'issued', head: words.issued, right: true, cell: ({ issuedCents }: Month) => (issuedCents === 0 ? '–' : formatChange(issuedCents)) }] : []),
  ];
  return (
    <>
      <DataTable caption={words.title} columns={columns} rows={ahead.months} rowKey={({ month }) => month} />
      <p style={{ marginTop: 12 }}>
        {words.sum} <Figure steps={ahead.steps} label={words.sum}><Money cents={ahead.totalCents} /></Figure>
      </p>
    </>
  );
}
