import { useQuery, useQueryClient } from '@tanstack/react-query';
import { formatMoney, formatRate } from '@tallypole/shared/money';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { fundingRoutes, LoanTerms, type Loan } from '@tallypole/shared/schemas/loans';
import { may } from '@tallypole/shared/schemas/permissions';
import { useJob } from '../../../lib/job.ts';
import { FieldRow, Form, MoneyField, PercentField, SelectField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { FailureState, LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { loanQuery, setLoan } from '../api/lending.ts';
import { strings } from '../strings.ts';

const words = strings.loan;

/** The loan's terms: read by whoever sees draws, entered by the firm's office or the lender. */
export function Component() {
  const job = useJob();
  const { data, error, refetch } = useQuery(loanQuery(job.id));
  if (error && !data) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!data) return <LoadingState />;
  const { loan } = data;
  return (
    <>
      <PageHead title={words.title}>
        <p className="quiet">{loan ? words.explain : words.none}</p>
      </PageHead>
      {loan ? <Terms loan={loan} /> : null}
      {may(job.roles, 'loan.terms') && (loan === null || loan.disbursedCents === 0) ? (
        <Section title={words.save} ruled={loan !== null}>
          <LoanForm key={loan?.version ?? 0} job={job} loan={loan} />
        </Section>
      ) : null}
    </>
  );
}

function Terms({ loan }: { loan: Loan }) {
  const rows: [string, string][] = [
    [words.fields.lenderName, loan.lenderName],
    [words.fields.amountCents, formatMoney(loan.amountCents)],
    [words.fields.constructionCents, formatMoney(loan.constructionCents)],
    [words.fields.equityFirstCents, formatMoney(loan.equityFirstCents)],
    [words.fields.holdbackRate, formatRate(loan.holdbackRate)],
    [words.fields.consentLimitCents, formatMoney(loan.consentLimitCents)],
    [words.fields.shortfall, words.shortfall[loan.shortfall]],
    [words.fields.route, words.route[loan.route]],
    [words.disbursed, formatMoney(loan.disbursedCents)],
  ];
  return (
    <dl style={{ margin: 0, maxWidth: 560 }}>
      {rows.map(([name, value]) => (
        <div key={name} style={{ display: 'flex', justifyContent: 'space-between', gap: 16, padding: '8px 0', borderBottom: '1px solid var(--rule)' }}>
          <dt>{name}</dt>
          <dd style={{ margin: 0, textAlign: 'right' }}>{value}</dd>
        </div>
      ))}
    </dl>
  );
}

function LoanForm({ job, loan }: { job: Job; loan: Loan | null }) {
  const freshId = useNewId(`loan-${job.id}-${loan?.version ?? 0}`);
  const id = loan?.id ?? freshId;
  const queries = useQueryClient();
  const initialValues = {
    lenderName: loan?.lenderName ?? '',
    amountCents: loan?.amountCents ?? ('' as number | ''),
    constructionCents: loan?.constructionCents ?? ('' as number | ''),
    equityFirstCents: loan?.equityFirstCents ?? 0,
    holdbackRate: loan?.holdbackRate ?? 0,
    consentLimitCents: loan?.consentLimitCents ?? 0,
    shortfall: loan?.shortfall ?? ('homeowner' as const),
    route: loan?.route ?? ('builder' as const),
  };
  const act = useActForm({
    name: `loan-${job.id}-${loan?.version ?? 0}`,
    initialValues,
    schema: LoanTerms,
    send: (values, key) => setLoan(job.id, { ...values, id, amountCents: Number(values.amountCents), constructionCents: Number(values.constructionCents) }, key),
    onDone: (answer) => {
      queries.setQueryData(loanQuery(job.id).queryKey, answer);
      toast(words.saved);
    },
  });
  return (
    <Form act={act} submitLabel={words.save}>
      <TextField field={act.field('lenderName')} label={words.fields.lenderName} autoComplete="organization" />
      <FieldRow>
        <MoneyField field={act.field('amountCents')} label={words.fields.amountCents} />
        <MoneyField field={act.field('constructionCents')} label={words.fields.constructionCents} hint={words.hints.constructionCents} />
      </FieldRow>
      <FieldRow>
        <MoneyField field={act.field('equityFirstCents')} label={words.fields.equityFirstCents} hint={words.hints.equityFirstCents} />
        <PercentField field={act.field('holdbackRate')} label={words.fields.holdbackRate} hint={words.hints.holdbackRate} />
      </FieldRow>
      <MoneyField field={act.field('consentLimitCents')} label={words.fields.consentLimitCents} />
      <SelectField field={act.field('shortfall')} label={words.fields.shortfall} options={(['homeowner', 'carried'] as const).map((value) => ({ value, label: words.shortfall[value] }))} />
      <SelectField field={act.field('route')} label={words.fields.route} options={fundingRoutes.map((value) => ({ value, label: words.route[value] }))} />
    </Form>
  );
}
