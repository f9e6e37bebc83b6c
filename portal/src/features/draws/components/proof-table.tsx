import { formatRate, sum } from '@tallypole/shared/money';
import type { Draw, DrawLine } from '@tallypole/shared/schemas/draws';
import { DataTable, type Column } from '../../../ui/data-table.tsx';
import { Money } from '../../../ui/money.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { strings } from '../strings.ts';
import { billedLines, photosOf, seenRate } from './proof.ts';

const { columns: titles, byTime, proof } = strings.review;

/** What is billed beside what was seen, line by line. */
export function ProofTable({ draw }: { draw: Draw }) {
  const columns: readonly Column<DrawLine>[] = [
    { key: 'line', head: titles.line, cell: ({ description }) => description },
    { key: 'billed', head: titles.billed, right: true, cell: ({ billedBeforeCents, thisDrawCents }) => <Money cents={sum([billedBeforeCents, thisDrawCents])} /> },
    { key: 'rate', head: titles.rate, right: true, cell: ({ billedRate }) => formatRate(billedRate) },
    { key: 'seen', head: titles.proven, right: true, cell: (line) => <Seen draw={draw} line={line} /> },
    { key: 'photos', head: titles.photos, right: true, cell: (line) => String(photosOf(draw, line)) },
  ];
  return <DataTable caption={proof} columns={columns} rows={billedLines(draw)} rowKey={({ lineId }) => lineId} />;
}

function Seen({ draw, line }: { draw: Draw; line: DrawLine }) {
  const seen = seenRate(draw, line);
  if (seen === null) return <span className="quiet">{byTime}</span>;
  return line.billedRate > seen ? <StateTag meaning="refused">{`only ${formatRate(seen)}`}</StateTag> : <>{formatRate(seen)}</>;
}
