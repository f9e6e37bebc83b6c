import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import axe from 'axe-core';
import { useState } from 'react';
import { describe, expect, it, vi } from 'vitest';
import { cellsFromClipboard } from './clipboard.ts';
import { LineSheet } from './line-sheet.tsx';
import type { CellEdit, SheetColumn } from './types.ts';

interface Line {
  id: string;
  description: string;
  amount: string;
  kind: string;
}

let drawn = 0;
const columns: readonly SheetColumn<Line>[] = [
  { key: 'id', title: 'No.', text: ({ id }) => id },
  { key: 'description', title: 'Description', text: ({ description }) => description, edit: true, problem: ({ description }) => (description === '' ? 'Enter the description.' : null) },
  { key: 'amount', title: 'Amount', align: 'right', text: ({ amount }) => amount, show: ({ amount }) => {
    drawn += 1;
    return `$${amount}`;
  }, edit: true, inputMode: 'decimal' },
  { key: 'kind', title: 'Kind', text: ({ kind }) => kind, edit: true, choices: [{ value: 'base', label: 'Base work' }, { value: 'allowance', label: 'Allowance' }] },
];
const line = (id: string): Line => ({ id, description: `Line ${id}`, amount: `${id}00`, kind: 'base' });

function Page({ count = 3, onEdits }: { count?: number; onEdits?: (edits: CellEdit[]) => void }) {
  const [rows, setRows] = useState(() => Array.from({ length: count }, (_, i) => line(String(i + 1))));
  const edit = (edits: CellEdit[]) => {
    onEdits?.(edits);
    setRows((before) => {
      const after = [...before];
      for (const { row, column, text } of edits) after[row] = { ...(after[row] ?? line(String(row + 1))), [column]: text };
      return after;
    });
  };
  return <LineSheet label="Lines" rows={rows} rowKey={({ id }) => id} columns={columns} onEdit={edit} canGrow group={({ id }) => (Number(id) < 3 ? 'Frame' : 'Finish')} totals={{ description: 'Total', amount: '600' }} />;
}

const cell = (row: number, column: number) => {
  const found = document.querySelector<HTMLElement>(`[data-cell="${row}:${column}"]`);
  if (!found) throw new Error(`no cell ${row}:${column}`);
  return found;
};

describe('the line sheet', () => {
  it('is one stop for Tab and moves by arrows, to the edge with Ctrl', async () => {
    const user = userEvent.setup();
    render(<><Page /><button>After</button></>);
    await user.tab();
    expect(cell(0, 0)).toHaveFocus();
    await user.keyboard('{ArrowDown}{ArrowRight}');
    expect(cell(1, 1)).toHaveFocus();
    await user.keyboard('{Control>}{End}{/Control}');
    expect(cell(2, 3)).toHaveFocus();
    await user.keyboard('{ArrowDown}{Home}');
    expect(cell(2, 0)).toHaveFocus();
    await user.tab();
    expect(screen.getByRole('button', { name: 'After' })).toHaveFocus();
  });

  it('edits with Enter and goes down, goes on with Tab, gives up with Escape', async () => {
    const user = userEvent.setup();
    const onEdits = vi.fn();
    render(<Page onEdits={onEdits} />);
    await user.click(cell(0, 1));
    await user.keyboard('{Enter}');
    const field = screen.getByRole('textbox', { name: 'Description, line 1' });
    expect(field).toHaveFocus();
    await user.clear(field);
    await user.keyboard('Studs{Enter}');
    expect(onEdits).toHaveBeenLastCalledWith([{ row: 0, column: 'description', text: 'Studs' }]);
    expect(cell(1, 1)).toHaveFocus();
    await user.keyboard('Ties{Tab}');
    expect(onEdits).toHaveBeenLastCalledWith([{ row: 1, column: 'description', text: 'Ties' }]);
    expect(screen.getByRole('textbox', { name: 'Amount, line 2' })).toHaveFocus();
    await user.keyboard('999{Escape}');
    expect(onEdits).toHaveBeenCalledTimes(2);
    expect(cell(1, 2)).toHaveFocus();
    expect(cell(1, 2)).toHaveTextContent('$200');
  });

  it('offers a choice where the cell is one, and keeps out of cells that are not edited', async () => {
    const user = userEvent.setup();
    const onEdits = vi.fn();
    render(<Page onEdits={onEdits} />);
    await user.dblClick(cell(0, 3));
    await user.selectOptions(screen.getByRole('combobox', { name: 'Kind, line 1' }), 'allowance');
    await user.keyboard('{Enter}');
    expect(onEdits).toHaveBeenLastCalledWith([{ row: 0, column: 'kind', text: 'allowance' }]);
    await user.click(cell(0, 0));
    await user.keyboard('{Enter}9');
    expect(screen.queryByRole('textbox')).toBeNull();
    expect(cell(0, 0)).toHaveAttribute('aria-readonly', 'true');
  });

  it('takes a paste from a spreadsheet in one edit, beyond the last row too', async () => {
    const user = userEvent.setup();
    const onEdits = vi.fn();
    render(<Page onEdits={onEdits} />);
    await user.click(cell(2, 1));
    await user.paste('"Siding, ""board"""\t1,200.50\tAllowance\nPaint\t800\tno such kind\n');
    expect(onEdits).toHaveBeenCalledOnce();
    expect(onEdits).toHaveBeenCalledWith([
      { row: 2, column: 'description', text: 'Siding, "board"' },
      { row: 2, column: 'amount', text: '1,200.50' },
      { row: 2, column: 'kind', text: 'allowance' },
      { row: 3, column: 'description', text: 'Paint' },
      { row: 3, column: 'amount', text: '800' },
    ]);
    expect(cell(3, 1)).toHaveTextContent('Paint');
  });

  it('says at the cell what is wrong with it', async () => {
    const user = userEvent.setup();
    render(<Page />);
    await user.click(cell(1, 1));
    await user.keyboard('{Delete}');
    expect(cell(1, 1)).toHaveAttribute('aria-invalid', 'true');
    expect(cell(1, 1)).toHaveAccessibleDescription('Enter the description.');
  });

  it('holds 500 lines and redraws only the one that is edited', async () => {
    const user = userEvent.setup({ delay: null });
    render(<Page count={500} />);
    const grid = screen.getByRole('grid', { name: 'Lines' });
    expect(within(grid).getAllByRole('row')).toHaveLength(504);
    await user.click(cell(0, 1));
    drawn = 0;
    await user.keyboard('Studs{Enter}');
    expect(cell(0, 1)).toHaveTextContent('Studs');
    // the first row as it is typed into, and the second as it is gone to
    expect(drawn).toBeLessThan(20);
  });

  it('has nothing that axe finds', async () => {
    const { container } = render(<Page />);
    const { violations } = await axe.run(container, { rules: { 'color-contrast': { enabled: false }, region: { enabled: false } } });
    expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join()}`)).toEqual([]);
  });
});

describe('reading the clipboard', () => {
  it.each([
    ['a\tb\r\nc\td\r\n', [['a', 'b'], ['c', 'd']]],
    ['one', [['one']]],
    ['"two\nlines"\tb', [['two lines', 'b']]],
    ['5" pipe\t1', [['5" pipe', '1']]],
    ['', [['']]],
  ])('reads %j', (text, cells) => {
    expect(cellsFromClipboard(text)).toEqual(cells);
  });
});
