import type { Payment } from '@tallypole/shared/schemas/payments';
import { writtenDate } from '../lib/dates.ts';
import { DataTable, type Column } from './data-table.tsx';
import { PaymentTag } from './money-tags.tsx';
import { Money } from './money.tsx';

const METHODS: Readonly<Record<Payment['method'], string>> = { checkout: 'Bank debit', check: 'Check', wire: 'Wire', loan_advance: 'Loan' };

const COLUMNS: readonly Column<Payment>[] = [
  { key: 'what', head: 'For', cell: ({ drawNumber }) => (drawNumber === null ? 'Deposit' : `Draw ${drawNumber}`) },
  { key: 'method', head: 'How', cell: ({ method, reference }) => (reference ? `${METHODS[method]}, ${reference}` : METHODS[method]) },
  { key: 'state', head: 'State', cell: ({ state, trouble }) => <><PaymentTag state={state} />{trouble ? <div className="quiet">{trouble}</div> : null}</> },
  { key: 'on', head: 'On', cell: ({ settledOn, startedOn }) => writtenDate(settledOn ?? startedOn) },
  { key: 'sum', head: 'Sum', right: true, cell: ({ amountCents }) => <Money cents={amountCents} /> },
  { key: 'kept', head: 'Received', right: true, cell: ({ keptCents }) => <Money cents={keptCents} /> },
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
