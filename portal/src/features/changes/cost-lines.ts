import { lineCents } from '@tallypole/shared/pricing';
import { formatChange } from '@tallypole/shared/money';
import type { CostLine } from '@tallypole/shared/schemas/changes';
import { v7 } from 'uuid';
import type { CellEdit, SheetColumn } from '../../ui/line-sheet/types.ts';

export const emptyLine = (): CostLine => ({ id: v7(), description: '', class: 'material', effect: 'add', quantity: '1', unit: 'ea', unitCost: '0', taxable: true });

const amount = (line: CostLine): string => {
  try {
    return formatChange(lineCents(line));
  } catch {
    return '–';
  }
};

const number = (typed: string): string => typed.replace(/[\s,$]/g, '');
const isNumber = (text: string): string | null => (/^\d{1,12}(\.\d{1,4})?$/.test(text) ? null : 'Enter a number with up to 4 places.');

/** The sheet's columns: what a change adds and takes out. */
export const columns: readonly SheetColumn<CostLine>[] = [
  { key: 'description', title: 'What', edit: true, text: ({ description }) => description, problem: ({ description, unitCost }) => (description.trim() === '' && unitCost !== '0' ? 'Say what it is.' : null) },
  { key: 'effect', title: 'Added or taken out', width: '8rem', edit: true, text: ({ effect }) => effect, choices: [{ value: 'add', label: 'added' }, { value: 'deduct', label: 'taken out' }], show: ({ effect }) => (effect === 'add' ? 'added' : 'taken out') },
  { key: 'class', title: 'Kind', width: '8rem', edit: true, text: (line) => line.class, choices: ['labor', 'material', 'equipment', 'subcontract', 'fee'].map((value) => ({ value, label: value })) },
  { key: 'quantity', title: 'Quantity', width: '6rem', align: 'right', edit: true, inputMode: 'decimal', text: ({ quantity }) => quantity, problem: ({ quantity }) => isNumber(quantity) },
  { key: 'unit', title: 'Unit', width: '4.5rem', edit: true, text: ({ unit }) => unit, problem: ({ unit }) => (unit.trim() === '' ? 'Enter a unit.' : null) },
  { key: 'unitCost', title: 'Unit cost', width: '7rem', align: 'right', edit: true, inputMode: 'decimal', text: ({ unitCost }) => unitCost, problem: ({ unitCost }) => isNumber(unitCost) },
  { key: 'taxable', title: 'Taxed', width: '5rem', edit: true, text: ({ taxable }) => (taxable ? 'yes' : 'no'), choices: [{ value: 'yes', label: 'yes' }, { value: 'no', label: 'no' }] },
  { key: 'amount', title: 'Cost', width: '8rem', align: 'right', text: amount },
];

/** The lines after edits; a paste beyond the last row adds lines. */
export function applyEdits(lines: readonly CostLine[], edits: readonly CellEdit[]): CostLine[] {
  const next = [...lines];
  for (const { row, column, text } of edits) {
    while (next.length <= row) next.push(emptyLine());
    const line = next[row];
    if (line) next[row] = withCell(line, column, text);
  }
  return next;
}

function withCell(line: CostLine, column: string, text: string): CostLine {
  switch (column) {
    case 'effect':
      return { ...line, effect: /^(d|t)/i.test(text.trim()) ? 'deduct' : 'add' };
    case 'class': {
      const found = (['labor', 'material', 'equipment', 'subcontract', 'fee'] as const).find((known) => known.startsWith(text.trim().toLowerCase().slice(0, 3)));
      return { ...line, class: found ?? line.class };
    }
    case 'taxable':
      return { ...line, taxable: /^y/i.test(text.trim()) };
    case 'quantity':
    case 'unitCost':
      return { ...line, [column]: number(text) };
    case 'description':
    case 'unit':
      return { ...line, [column]: text };
    default:
      return line;
  }
}
