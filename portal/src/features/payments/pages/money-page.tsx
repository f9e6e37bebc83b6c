import { useQuery } from '@tanstack/react-query';
import { rowSteps } from '@tallypole/shared/draw';
import { sum } from '@tallypole/shared/money';
import type { DrawRow } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { may } from '@tallypole/shared/schemas/permissions';
import { Link } from 'react-router-dom';
import { writtenDate } from '../../../lib/dates.ts';
import { useJob } from '../../../lib/job.ts';
import { DataTable, type Column } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { DrawTag } from '../../../ui/money-tags.tsx';
import { Money } from '../../../ui/money.tsx';
import { FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { PaymentTable } from '../../../ui/payment-table.tsx';
import { moneyQuery } from '../api/payments.ts';
import { CashAhead } from '../components/cash-ahead.tsx';
import { ConfirmButton } from '../components/confirm-button.tsx';
import { RecordForm } from '../components/record-form.tsx';
import classes from '../components/payments.module.css';
import { strings } from '../strings.ts';

const words = strings.money;
type Named = keyof typeof words.figures;
const ORDER: readonly Named[] = ['contractSumToday', 'billed', 'retainageHeld', 'approved', 'paid', 'open', 'openHomeowner', 'openLoan', 'leftToBill', 'depositLeft', 'fees'];

/** The money of the job, each figure from the ledger. */
export function Component() {
  const job = useJob();
  const { data, error, refetch } = useQuery(moneyQuery(job.id));
  return (
    <>
      <PageHead title={words.title}>
        <p className="quiet">{words.explain}</p>
      </PageHead>
      {error && !data ? <FailureState error={error} onRetry={() => void refetch()} /> : null}
      {data ? <JobMoneyView job={job} money={data} /> : error ? null : <LoadingState lines={8} />}
    </>
  );
}

function JobMoneyView({ job, money }: { job: Job; money: JobMoney }) {
  const records = may(job.roles, 'payment.record');
  return (
    <>
      <dl className={classes['figures']}>
        {ORDER.map((name) => {
          const figure = money[name];
          return figure === null ? null : (
            <div key={name}>
              <dt>{words.figures[name]}</dt>
              <dd className={name === 'open' ? 'sum' : undefined}>
                <Figure steps={figure.step} label={words.figures[name]}>
                  <Money cents={figure.cents} />
                </Figure>
              </dd>
            </div>
          );
        })}
      </dl>
      {money.draws.length === 0 ? null : (
        <Section title={words.draws}>
          <DataTable caption={words.draws} columns={COLUMNS} rows={money.draws} rowKey={({ id }) => id} />
        </Section>
      )}
      <CashAhead jobId={job.id} />
      <Section title={words.payments}>
        {money.payments.length === 0 ? <p className="quiet">{words.noPayments}</p> : <Payments job={job} money={money} records={records} />}
      </Section>
      {records ? (
        <Section title={strings.record.title}>
          <RecordForm job={job} money={money} />
        </Section>
      ) : null}
      {may(job.roles, 'draw.read') ? (
        <Section title={words.loan}>
          <Link to={`/jobs/${job.id}/loan`}>{words.loanLink}</Link>
        </Section>
      ) : null}
    </>
  );
}

function Payments({ job, money, records }: { job: Job; money: JobMoney; records: boolean }) {
  const waits = money.payments.some(({ method, state }) => method === 'loan_advance' && state === 'processing');
  if (!records || !waits) return <PaymentTable payments={money.payments} />;
  return <PaymentTable payments={money.payments} actions={(payment) => (payment.method === 'loan_advance' && payment.state === 'processing' ? <ConfirmButton job={job} payment={payment} /> : null)} />;
}

const { columns: titles } = words;
const COLUMNS: readonly Column<DrawRow>[] = [
  { key: 'number', head: titles.draw, cell: ({ id, number }) => <Link to={`../draws/${id}`} relative="path">{`Draw ${number}`}</Link> },
  { key: 'state', head: titles.state, cell: ({ state }) => <DrawTag state={state} /> },
  { key: 'due', head: titles.due, right: true, cell: (row) => <Figure steps={rowSteps(row).due} label={`Draw ${row.number}, ${titles.due}`}><Money cents={row.dueCents} /></Figure> },
  { key: 'paid', head: titles.paid, right: true, cell: (row) => <Figure steps={rowSteps(row).paid} label={`Draw ${row.number}, ${titles.paid}`}><Money cents={sum([row.paidHomeownerCents, row.paidLoanCents])} /></Figure> },
  { key: 'open', head: titles.open, right: true, cell: (row) => <Figure steps={rowSteps(row).open} label={`Draw ${row.number}, ${titles.open}`}><Money cents={sum([row.openHomeownerCents, row.openLoanCents])} /></Figure> },
  { key: 'dueOn', head: titles.dueOn, cell: ({ dueOn }) => (dueOn === null ? '–' : writtenDate(dueOn)) },
];
