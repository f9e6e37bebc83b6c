import type { Change } from '@tallypole/shared/schemas/changes';
import { DataTable } from '../../../ui/data-table.tsx';
import { Section } from '../../../ui/page.tsx';

type ScopeLine = Change['scope'][number];

/** What is built and what is left out, with quantities and without a price. */
export function ScopeList({ scope }: { scope: Change['scope'] }) {
  if (scope.length === 0) return null;
  const columns = [
    { key: 'what', head: 'What', cell: (line: ScopeLine) => line.description },
    { key: 'how', head: 'Added or taken out', cell: (line: ScopeLine) => (line.effect === 'deduct' ? 'taken out' : 'added') },
    { key: 'quantity', head: 'Quantity', right: true, cell: (line: ScopeLine) => `${line.quantity} ${line.unit}` },
  ];
  return (
    <Section title="What is built" ruled={false}>
      <DataTable caption="What is built" columns={columns} rows={scope.map((line, i) => ({ ...line, key: String(i) }))} rowKey={({ key }) => key} />
    </Section>
  );
}
