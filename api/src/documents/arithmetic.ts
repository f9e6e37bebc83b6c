import type { Step } from '@tallypole/shared/arithmetic';
import { formatFigure } from '@tallypole/shared/money';
import type { Content, TableCell } from 'pdfmake/interfaces.js';
import { writtenBusinessDate } from '../common/written-date.ts';

const INDENT = 14;

/** A computation down to its given figures, as a paper prints it: each step with its rule, what it follows from indented below it. */
export function printedArithmetic(steps: readonly Step[]): Content {
  return {
    table: { dontBreakRows: true, widths: ['*', 'auto'], body: steps.flatMap((step) => rowsOf(step, 0)) },
    layout: { hLineWidth: () => 0, vLineWidth: () => 0, paddingLeft: () => 0, paddingRight: () => 0, paddingTop: () => 2, paddingBottom: () => 2 },
  };
}

function rowsOf(step: Step, level: number): TableCell[][] {
  const given = step.rule === 'given';
  const rule = given ? [] : [{ text: `${step.rule}${step.exact === undefined ? '' : `; exactly ${step.exact} before rounding`}`, style: 'small' }];
  const label: TableCell = { stack: [{ text: step.label, style: given ? 'quiet' : '' }, ...rule], margin: [level * INDENT, level === 0 ? 6 : 0, 0, 0] };
  const result: TableCell = { text: formatFigure(step.result, (date) => writtenBusinessDate(date)), alignment: 'right', noWrap: true, style: given ? 'quiet' : '', margin: [0, level === 0 ? 6 : 0, 0, 0] };
  return [[label, result], ...step.inputs.flatMap((input) => rowsOf(input, level + 1))];
}
