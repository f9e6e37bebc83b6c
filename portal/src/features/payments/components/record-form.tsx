import { useQueryClient } from '@tanstack/react-query';
import type { Job } from '@tallypole/shared/schemas/jobs';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { RecordPayment } from '@tallypole/shared/schemas/payments';
import { v7 } from 'uuid';
import { useState } from 'react';
import { DateField, FieldRow, Form, MoneyField, SelectField, TextField, useActForm } from '../../../ui/forms/index.ts';
import { toast } from '../../../ui/toast.ts';
import { recordPayment } from '../api/payments.ts';
import { strings } from '../strings.ts';

const words = strings.record;

interface Target {
  value: string;
  label: string;
  drawId: string | null;
  source: 'homeowner' | 'loan';
}

/** What is open and could be paid by check or wire. */
function targetsOf({ draws, depositDueCents }: JobMoney): Target[] {
  const open = draws.flatMap(({ id, number, openHomeownerCents, openLoanCents }): Target[] => [
    ...(openHomeownerCents > 0 ? [{ value: `${id} homeowner`, label: words.draw(number, words.homeowner, openHomeownerCents), drawId: id, source: 'homeowner' as const }] : []),
    ...(openLoanCents > 0 ? [{ value: `${id} loan`, label: words.draw(number, words.loan, openLoanCents), drawId: id, source: 'loan' as const }] : []),
  ]);
  return depositDueCents > 0 ? [...open, { value: 'deposit', label: words.deposit(depositDueCents), drawId: null, source: 'homeowner' }] : open;
}

interface Values {
  target: string;
  method: 'check' | 'wire';
  amountCents: number | '';
  receivedOn: string;
  reference: string;
}

const blank = (targets: readonly Target[], today: string): Values => ({ target: targets[0]?.value ?? '', method: 'check', amountCents: '', receivedOn: today, reference: '' });

const Typed = RecordPayment.pick({ method: true, amountCents: true, receivedOn: true, reference: true }).extend({ target: RecordPayment.shape.reference });

/** A check or a wire that is in hand. */
export function RecordForm({ job, money }: { job: Job; money: JobMoney }) {
  const targets = targetsOf(money);
  const [id, setId] = useState(() => v7());
  const queries = useQueryClient();
  const act = useActForm({
    name: `payment-record-${job.id}`,
    initialValues: blank(targets, job.today),
    schema: Typed,
    send: ({ target, method, amountCents, receivedOn, reference }, key) => {
      const chosen = targets.find(({ value }) => value === target) ?? targets[0];
      return recordPayment(job.id, { id, drawId: chosen?.drawId ?? null, source: chosen?.source ?? 'homeowner', method, amountCents: Number(amountCents), receivedOn, reference }, key);
    },
    onDone: () => {
      toast(words.done);
      setId(v7());
      act.form.reset();
      void queries.invalidateQueries({ queryKey: ['jobs', job.id] });
    },
  });
  if (targets.length === 0) return <p className="quiet">{words.nothing}</p>;
  return (
    <Form act={act} submitLabel={words.button}>
      <SelectField field={act.field('target')} label={words.what} options={targets} />
      <FieldRow>
        <SelectField field={act.field('method')} label={words.method} options={(['check', 'wire'] as const).map((value) => ({ value, label: words.methods[value] }))} />
        <MoneyField key={id} field={act.field('amountCents')} label={words.amount} />
      </FieldRow>
      <FieldRow>
        <DateField field={act.field('receivedOn')} label={words.receivedOn} near={job.today} />
        <TextField field={act.field('reference')} label={words.reference} hint={words.referenceHint} autoComplete="off" />
      </FieldRow>
    </Form>
  );
}
