import { Button, TextInput } from '@mantine/core';
import { differenceLines, type DifferenceItem, type ListedPrice } from '@tallypole/shared/takeoff';
import type { PriceLine } from '@tallypole/shared/pricing';
import { DataTable } from '../../../ui/data-table.tsx';
import { strings, unitWords } from '../strings.ts';
import classes from './takeoff.module.css';

interface Props {
  difference: readonly DifferenceItem[];
  costs: Record<string, string>;
  onCost: (key: string, cost: string) => void;
  onWrite: (lines: PriceLine[]) => void;
}

const COST = /^\d{1,12}(\.\d{1,4})?$/;
const plain = (typed: string): string => typed.replace(/[\s,$]/g, '');
const good = (typed: string): boolean => COST.test(plain(typed)) && Number(plain(typed)) > 0;

/** What differs, each item with its unit cost; a missing one is asked for. */
export function Difference({ difference, costs, onCost, onWrite }: Props) {
  if (difference.length === 0) return <p className="quiet">{strings.same}</p>;
  const prices = new Map(difference.flatMap(({ key }): [string, ListedPrice][] => (good(costs[key] ?? '') ? [[key, { unitCost: plain(costs[key] ?? ''), taxable: true }]] : [])));
  const { lines, missing } = differenceLines(difference, prices);
  return (
    <>
      <p className="quiet">{strings.costHint}</p>
      <DataTable
        caption={strings.differs}
        columns={[
          { key: 'what', head: strings.columns.what, cell: ({ label }: DifferenceItem) => label },
          { key: 'difference', head: strings.columns.difference, right: true, cell: ({ effect, quantity, unit }: DifferenceItem) => <span className="number">{`${effect === 'add' ? '+' : '−'}${quantity} ${unitWords[unit]}`}</span> },
          {
            key: 'cost', head: strings.columns.cost, right: true,
            cell: ({ key, label }: DifferenceItem) => {
              const typed = costs[key] ?? '';
              return <TextInput className={classes['cost'] ?? ''} aria-label={`${strings.columns.cost}, ${label}`} value={typed} onChange={({ currentTarget }) => onCost(key, currentTarget.value)} error={typed.trim() !== '' && !good(typed) ? strings.badCost : undefined} inputMode="decimal" autoComplete="off" leftSection="$" />;
            },
          },
        ]}
        rows={difference}
        rowKey={({ key }) => key}
      />
      <div style={{ marginTop: 16 }}>
        {missing.length > 0 ? <p role="status">{strings.missing(missing.length)}</p> : <Button onClick={() => onWrite(lines)}>{strings.write}</Button>}
      </div>
    </>
  );
}
