import { CreateJob } from '@tallypole/shared/schemas/jobs';
import { useNavigate, useParams } from 'react-router-dom';
import { todayIn } from '../../../lib/dates.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { timeZones } from '../../../lib/time-zones.ts';
import { CheckboxField, DateField, FieldGroup, FieldRow, Form, MoneyField, NumberField, PercentField, SelectField, TextField, useActForm, useNewId, type ActForm } from '../../../ui/forms/index.ts';
import { PageHead } from '../../../ui/page.tsx';
import { createJob } from '../api/create-job.ts';
import { jobsQuery } from '../api/get-jobs.ts';
import { strings } from '../strings.ts';

const zone = Intl.DateTimeFormat().resolvedOptions().timeZone;

const emptyJob = (id: string, firmId: string) => ({
  id,
  firmId,
  name: '',
  address: { street: '', city: '', state: '', zip: '' },
  timeZone: zone,
  terms: {
    style: 'percent_complete',
    contractSumCents: '' as unknown,
    signedOn: '',
    startOn: '',
    completeBy: '',
    dayKind: 'working',
    retainageRate: 0 as unknown,
    depositCents: 0 as unknown,
    reviewDays: 5 as unknown,
    paymentDays: 10 as unknown,
    lateRate: 0 as unknown,
    homeownersSign: 'all',
    openBook: false,
  },
});
type Values = ReturnType<typeof emptyJob>;

export function Component() {
  const { firmId = '' } = useParams();
  const id = useNewId(`create-job-${firmId}`);
  const navigate = useNavigate();
  const act = useActForm({
    name: `create-job-${firmId}`,
    initialValues: emptyJob(id, firmId),
    schema: CreateJob,
    send: (values: Values, key) => createJob(values as CreateJob, key),
    onDone: (job) => void queryClient.invalidateQueries(jobsQuery).then(() => navigate(`/jobs/${job.id}`)),
  });
  return (
    <main style={{ maxWidth: 760, margin: '0 auto', padding: '32px clamp(16px, 3vw, 40px)' }} id="main">
      <PageHead title="Create a job">
        <p className="quiet">{strings.createHint}</p>
      </PageHead>
      <Form act={act} submitLabel="Create the job">
        <Place act={act} />
        <Contract act={act} />
        <Payment act={act} />
      </Form>
    </main>
  );
}

function Place({ act }: { act: ActForm<Values> }) {
  return (
    <FieldGroup legend="The place">
      <TextField field={act.field('name')} label="Name of the job" hint="What everybody calls it, often the street address." autoFocus />
      <TextField field={act.field('address.street')} label="Street" autoComplete="off" />
      <FieldRow>
        <TextField field={act.field('address.city')} label="City" autoComplete="off" />
        <TextField field={act.field('address.state')} label="State" hint="Two letters" maxLength={2} autoComplete="off" />
        <TextField field={act.field('address.zip')} label="ZIP code" inputMode="numeric" autoComplete="off" />
      </FieldRow>
      <SelectField field={act.field('timeZone')} label="Time zone of the site" options={timeZones(act.form.values.timeZone)} />
    </FieldGroup>
  );
}

function Contract({ act }: { act: ActForm<Values> }) {
  const near = todayIn(act.form.values.timeZone);
  return (
    <FieldGroup legend="The contract">
      <MoneyField field={act.field('terms.contractSumCents')} label="Contract sum as signed" />
      <SelectField field={act.field('terms.style')} label="How it is billed" options={strings.styles} />
      <FieldRow>
        <DateField field={act.field('terms.signedOn')} label="Signed on" near={near} />
        <DateField field={act.field('terms.startOn')} label="Work starts" near={near} />
        <DateField field={act.field('terms.completeBy')} label="Complete by" near={near} />
      </FieldRow>
      <SelectField field={act.field('terms.dayKind')} label="Days of the contract are" options={strings.dayKinds} />
      <SelectField field={act.field('terms.homeownersSign')} label="Changes and draws are signed by" options={strings.signers} />
      <CheckboxField field={act.field('terms.openBook')} label="Open book" hint={strings.openBookHint} />
    </FieldGroup>
  );
}

function Payment({ act }: { act: ActForm<Values> }) {
  return (
    <FieldGroup legend="Payment">
      <FieldRow>
        <MoneyField field={act.field('terms.depositCents')} label="Deposit" hint="Used up against the draws." />
        <PercentField field={act.field('terms.retainageRate')} label="Retainage" hint="Held back of each draw; 0 if none." />
      </FieldRow>
      <FieldRow>
        <NumberField field={act.field('terms.reviewDays')} label="Days to review a draw" />
        <NumberField field={act.field('terms.paymentDays')} label="Days to pay after approval" />
        <PercentField field={act.field('terms.lateRate')} label="Late interest per year" />
      </FieldRow>
      <p className="quiet">{strings.lawHint}</p>
    </FieldGroup>
  );
}
