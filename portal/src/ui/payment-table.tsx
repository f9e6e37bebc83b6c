import { given, money } from '@tallypole/shared/arithmetic';
import { receivedSteps } from '@tallypole/shared/funding';
import type { Payment } from '@tallypole/shared/schemas/payments';
import { writtenDate } from '../lib/dates.ts';
import { DataTable, type Column } from './data-table.tsx';
import { Figure } from './figure.tsx';
import { PaymentTag, paymentStateWords } from './money-tags.tsx';
import { Money } from './money.tsx';

const METHODS: Readonly<Record<Payment['method'], string>> = { checkout: 'Bank debit', check: 'Check', wire: 'Wire', loan_advance: 'Loan' };

const purpose = (drawNumber: number | null): string => (drawNumber === null ? 'Deposit' : `Draw ${drawNumber}`);

const COLUMNS: readonly Column<Payment>[] = [
  { key: 'what', head: 'For', cell: ({ drawNumber }) => purpose(drawNumber) },
  { key: 'method', head: 'How', cell: ({ method, reference }) => (reference ? `${METHODS[method]}, ${reference}` : METHODS[method]) },
  { key: 'state', head: 'State', cell: ({ state, trouble }) => <><PaymentTag state={state} />{trouble ? <div className="quiet">{trouble}</div> : null}</> },
  { key: 'on', head: 'On', cell: ({ settledOn, startedOn }) => writtenDate(settledOn ?? startedOn) },
  { key: 'sum', head: 'Sum', right: true, cell: ({ id, drawNumber, amountCents }) => <Figure label={`${purpose(drawNumber)}, paid`} steps={given(purpose(drawNumber), money(amountCents), { record: 'payment', id, label: purpose(drawNumber) })}><Money cents={amountCents} /></Figure> },
  { key: 'kept', head: 'Received', right: true, cell: ({ id, drawNumber, amountCents, keptCents, state }) => <Figure label={`${purpose(drawNumber)}, received`} steps={receivedSteps({ id, label: purpose(drawNumber), amountCents, keptCents, state: paymentStateWords(state) })}><Money cents={keptCents} /></Figure> },
];

/** Payments with what became of them, newest last or first as they are given. */
export const PaymentTable = ({ payments, actions }: { payments: readonly Payment[]; actions?: (payment: Payment) => React.ReactNode }) => (
  <DataTable
    caption="Payments"
    columns={actions ? [...COLUMNS, { key: 'act', head: '', cell: actions }] : COLUMNS}
    rows={payments}
    rowKey={({ id }) => id}
  />
);
