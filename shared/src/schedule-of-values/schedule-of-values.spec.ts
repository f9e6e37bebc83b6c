import { describe, expect, it } from 'vitest';
import { checkDrafts, phasesOf, proposeMilestones, readGrid, readScheduled, scheduleSum, sumProblem, type DraftLine, type GridRow } from './index.ts';

const grid = (...rows: (string | { error: string })[][]): GridRow[] => rows.map((cells, i) => ({ row: i + 1, cells }));
const HEADER = ['No.', 'Phase', 'Description', 'Scheduled value'];
const draft = (given: Partial<DraftLine> = {}): DraftLine => ({ row: 5, number: '1', phase: 'Frame', description: 'Studs', scheduled: '100.00', kind: 'base', milestone: 'Frame', ...given });

describe('reading a schedule of values', () => {
  it('skips titles and blank rows, carries phases down and reads sums as people write them', () => {
    const read = readGrid(grid(['Schedule, 9 Larkspur'], [], HEADER, ['1', 'Frame', 'Studs', '$1,200.50'], ['', '', '', ''], ['2', '', 'Plates, sill', ' 800 '], ['3', 'General', 'Permits', 'USD 99.50']), 210_000);
    expect(read?.headerRow).toBe(3);
    expect(read?.lines.map(({ row, phase, milestone }) => [row, phase, milestone])).toEqual([[4, 'Frame', 'Frame'], [6, 'Frame', 'Frame'], [7, 'General', '']]);
    expect(read).toMatchObject({ sumCents: 210_000, differenceCents: 0, problems: [] });
  });

  it.each([
    [['Item', 'Section', 'Scope of work', 'Amount ($)']],
    [['#', 'Division', 'Work item', 'Contract amount']],
    [['Line No.', 'Stage', 'Item', 'Price']],
    [['Cost code', 'Category', 'Description of work', 'Total']],
  ])('recognizes the header %j', (header) => {
    const read = readGrid(grid(header, ['7', 'Frame', 'Studs', '10']), 1_000);
    expect(read?.lines).toEqual([expect.objectContaining({ number: '7', phase: 'Frame', description: 'Studs', scheduled: '10' })]);
  });

  it('takes a row that only names a phase as the phase of the rows below it', () => {
    const read = readGrid(grid(['Description', 'Value'], ['Foundation', ''], ['Footings', '10'], ['Frame', ''], ['Studs', '20']), 3_000);
    expect(read?.lines.map(({ phase, description }) => [phase, description])).toEqual([['Foundation', 'Footings'], ['Frame', 'Studs']]);
  });

  it('compares totals with the lines above them, as a part or as the whole', () => {
    const right = readGrid(grid(HEADER, ['1', 'A', 'a', '10'], ['', '', 'Subtotal', '10'], ['2', 'B', 'b', '20'], ['', 'B total', '', '20'], ['', '', 'Grand total', '30']), 3_000);
    expect([right?.lines.length, right?.problems]).toEqual([2, []]);
    const wrong = readGrid(grid(HEADER, ['1', 'A', 'a', '10'], ['', '', 'Total', '12.50']), 1_000);
    expect(wrong?.problems).toEqual([{ row: 3, column: 'D', severity: 'note', message: 'The total says $12.50, but the lines above it add up to $10.00: $2.50 less.' }]);
    const option = readGrid(grid(HEADER, ['1', 'A', 'a', '10'], ['', '', 'Total', '10'], ['2', 'B', 'Deck, option', '5']), 1_000);
    expect(option?.problems).toEqual([expect.objectContaining({ row: 4, severity: 'note' })]);
    const station = readGrid(grid(HEADER, ['', 'A', 'Total station survey', '10']), 1_000);
    expect(station?.lines).toHaveLength(1);
  });

  it('names each wrong cell by row and column', () => {
    const read = readGrid(grid(HEADER, ['1', 'A', '', '10'], ['1', 'A', 'b', 'ten'], ['3', 'A', 'c', { error: '#REF!' }], ['4', 'A', 'd', '1.234'], ['5', 'A', 'e', '-5']), 1_000);
    expect(read?.problems.map(({ row, column, message }) => `${column}${row} ${message}`)).toEqual([
      'C2 Enter the description.',
      'D3 "ten" is not a sum of money such as 12,400.50.',
      'A3 No. 1 stands twice; it is also in row 2.',
      'D4 The cell shows the error #REF!.',
      'D5 Round "1.234" to whole cents.',
      'D6 The scheduled value must be more than zero.',
    ]);
  });

  it('is null where no row names the columns', () => {
    expect(readGrid(grid(['Prices good for 30 days']), 100)).toBeNull();
  });

  it('reads allowances from their column, or from the words where there is none', () => {
    const asked = readGrid(grid([...HEADER, 'Allowance?'], ['1', 'A', 'Cabinets (allowance)', '10', 'yes'], ['2', 'A', 'Doors (allowance)', '10', '']), 2_000);
    expect(asked?.lines.map(({ kind }) => kind)).toEqual(['allowance', 'base']);
    const said = readGrid(grid(HEADER, ['1', 'A', 'Cabinets (allowance)', '10'], ['2', 'General', 'Contingency', '10']), 2_000);
    expect(said?.lines.map(({ kind }) => kind)).toEqual(['allowance', 'contingency']);
  });
});

describe('checking drafts', () => {
  it('is ready only when every cell reads and the sum is the contract sum', () => {
    expect(checkDrafts([draft()], 10_000).ready).toBe(true);
    expect(checkDrafts([draft()], 10_001)).toMatchObject({ ready: false, differenceCents: 1 });
    expect(checkDrafts([draft({ description: ' ' })], 10_000).ready).toBe(false);
    expect(checkDrafts([], 0).ready).toBe(false);
  });

  it('says what is missing or too much', () => {
    expect(sumProblem({ sumCents: 47_415_500, contractSumCents: 48_650_000, differenceCents: 1_234_500 })).toBe('The lines add up to $474,155.00, the contract sum is $486,500.00: $12,345.00 missing.');
    expect(sumProblem({ sumCents: 200, contractSumCents: 100, differenceCents: -100 })).toContain('$1.00 too much.');
  });

  it.each([['(250.00)'], [''], ['1,23'], ['12.345'], ['1e5'], ['#DIV/0!']])('refuses %j as a scheduled value', (text) => {
    expect(readScheduled(text)).toHaveProperty('message');
  });
});

describe('proposing milestones', () => {
  it('spreads them over the contract time by scheduled value, in the order of the lines', () => {
    const lines = [draft({ milestone: 'Foundation', scheduled: '25' }), draft({ milestone: 'Frame', scheduled: '50' }), draft({ milestone: '', scheduled: '999' }), draft({ milestone: 'Finish', scheduled: '25' })];
    // 100 days: a quarter, three quarters, the end
    expect(proposeMilestones(lines, '2027-01-01', '2027-04-11')).toEqual([
      { name: 'Foundation', plannedOn: '2027-01-26' },
      { name: 'Frame', plannedOn: '2027-03-17' },
      { name: 'Finish', plannedOn: '2027-04-11' },
    ]);
  });

  it('spreads them evenly when no value can be read', () => {
    expect(proposeMilestones([draft({ milestone: 'A', scheduled: '?' }), draft({ milestone: 'B', scheduled: '?' })], '2027-01-01', '2027-01-11').map(({ plannedOn }) => plannedOn)).toEqual(['2027-01-06', '2027-01-11']);
  });
});

describe('the phases of a schedule', () => {
  it('add up line by line to the schedule', () => {
    const line = (id: string, phase: string, scheduledCents: number) => ({ id, number: id, phase, description: `Line ${id}`, scheduledCents });
    const phases = phasesOf([line('1', 'Frame', 1_050), line('2', 'Finish', 200), line('3', 'Frame', 50)]);
    expect(phases.map(({ name, lines, sum }) => [name, lines.map(({ id }) => id), sum.result])).toEqual([
      ['Frame', ['1', '3'], { kind: 'money', cents: 1_100 }],
      ['Finish', ['2'], { kind: 'money', cents: 200 }],
    ]);
    expect(scheduleSum(phases)).toMatchObject({ result: { kind: 'money', cents: 1_300 }, inputs: [{ label: 'Frame' }, { label: 'Finish' }] });
    expect(phases[0]?.sum.inputs[0]).toMatchObject({ label: '1 Line 1', origin: { record: 'line', id: '1' } });
  });
});
