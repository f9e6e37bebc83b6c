import { priceSteps } from '@tallypole/shared/changes';
import type { Change } from '@tallypole/shared/schemas/changes';
import { DataTable } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { MoneyChange } from '../../../ui/money.tsx';
import { Section } from '../../../ui/page.tsx';

type OwnersLine = Change['lines'][number];

/** What differs, line by line, down to the price. */
export function Differs({ change }: { change: Change }) {
  if (change.lines.length === 0) return <p style={{ marginTop: 16 }}>No price: {change.days > 0 ? 'it is about time alone.' : 'nothing is entered yet.'}</p>;
  const columns = [
    { key: 'what', head: 'What', cell: (line: OwnersLine) => line.description },
    { key: 'how', head: 'Added or taken out', cell: (line: OwnersLine) => <span className="quiet">{line.effect === 'deduct' ? 'taken out' : 'added'}</span> },
    { key: 'price', head: 'Price', right: true, cell: (line: OwnersLine) => <MoneyChange cents={line.cents} /> },
  ];
  const total = (
    <tr>
      <th scope="row" colSpan={2}>
        Price of the change
      </th>
      <td style={{ textAlign: 'right' }} className="sum">
        <Figure steps={priceSteps({ chargedCents: change.chargedCents ?? 0, lines: change.lines })} label="Price of the change">
          <MoneyChange cents={change.chargedCents ?? 0} />
        </Figure>
      </td>
    </tr>
  );
  return (
    <Section title="What differs" ruled={false}>
      <DataTable caption="What differs" columns={columns} rows={change.lines.map((line, i) => ({ ...line, key: String(i) }))} rowKey={(line) => line.key} footer={total} />
    </Section>
  );
}
