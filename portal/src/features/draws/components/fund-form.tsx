import { minus, sum } from '@tallypole/shared/money';
import { FundDraw, type Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { DateField, FieldRow, Form, MoneyField, TextField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';

const words = strings.review;

/** The lender has sent money: how much, when, under which reference. */
export function FundForm({ job, draw }: { job: Job; draw: Draw }) {
  const id = useNewId(`draw-fund-${draw.id}-${draw.fundings.length}`);
  const drawn = useDrawn(job.id);
  const left = minus(draw.loanCents, sum(draw.fundings.map(({ amountCents }) => amountCents)));
  const act = useActForm({
    name: `draw-fund-${draw.id}-${draw.fundings.length}`,
    initialValues: { amountCents: left, fundedOn: job.today, reference: '' },
    schema: FundDraw.omit({ id: true }),
    send: ({ amountCents, fundedOn, reference }, key) => actOnDraw(job.id, draw.id, 'review/fundings', { id, amountCents: Number(amountCents), fundedOn, reference }, key),
    onDone: (after) => drawn(after, words.funded),
  });
  const { amountCents } = act.form.values;
  return (
    <>
      <h3 style={{ margin: '0 0 8px' }}>{words.fund}</h3>
      <Form act={act} submitLabel={words.fundButton(typeof amountCents === 'number' ? amountCents : left)}>
        <p>{words.fundExplain(left)}</p>
        <FieldRow>
          <MoneyField field={act.field('amountCents')} label={words.amount} />
          <DateField field={act.field('fundedOn')} label={words.fundedOn} near={job.today} />
          <TextField field={act.field('reference')} label={words.reference} autoComplete="off" />
        </FieldRow>
      </Form>
    </>
  );
}
