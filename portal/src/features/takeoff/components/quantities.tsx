import type { TakeoffItem } from '@tallypole/shared/takeoff';
import { DataTable } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { strings, unitWords } from '../strings.ts';

interface Row {
  key: string;
  label: string;
  drawn: TakeoffItem | undefined;
  proposed: TakeoffItem | undefined;
}

/** What is bought on each side; every quantity opens its arithmetic. */
export function Quantities({ drawn, proposed }: { drawn: readonly TakeoffItem[]; proposed: readonly TakeoffItem[] }) {
  const keys = [...new Set([...drawn, ...proposed].map(({ key }) => key))];
  const rows = keys.map((key): Row => {
    const [a, b] = [drawn.find((item) => item.key === key), proposed.find((item) => item.key === key)];
    return { key, label: (b ?? a)?.label ?? key, drawn: a, proposed: b };
  });
  const side = (item: TakeoffItem | undefined, name: string) =>
    item ? (
      <Figure steps={item.steps} label={`${item.label}, ${name}`}>
        <span className="number">{item.purchased}</span> {unitWords[item.unit]}
      </Figure>
    ) : '–';
  return (
    <DataTable
      caption={strings.quantities}
      columns={[
        { key: 'what', head: strings.columns.what, cell: ({ label }: Row) => label },
        { key: 'drawn', head: strings.columns.drawn, right: true, cell: (row: Row) => side(row.drawn, strings.drawn) },
        { key: 'proposed', head: strings.columns.proposed, right: true, cell: (row: Row) => side(row.proposed, strings.proposed) },
      ]}
      rows={rows}
      rowKey={({ key }) => key}
    />
  );
}
