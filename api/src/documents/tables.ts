import type { Content, TableCell } from 'pdfmake/interfaces.js';

const RULE = '#d3d7d6';

/** A table under thin rules; the last column holds sums, on the right. */
export function ruledTable(head: readonly string[], rows: readonly (readonly string[])[], widths: readonly (string | number)[]): Content {
  const last = head.length - 1;
  const cell = (text: string, i: number, style?: string): TableCell => ({ text, alignment: i === last ? 'right' : 'left', noWrap: i === last, ...(style ? { style } : {}) });
  return {
    table: { headerRows: 1, keepWithHeaderRows: 1, dontBreakRows: true, widths: [...widths], body: [head.map((text, i) => cell(text, i, 'small')), ...rows.map((row) => row.map((text, i) => cell(text, i)))] },
    layout: { hLineWidth: (i) => (i === 0 ? 0 : 0.6), vLineWidth: () => 0, hLineColor: () => RULE, paddingLeft: () => 0, paddingRight: (i) => (i === last ? 0 : 10), paddingTop: () => 5, paddingBottom: () => 5 },
  };
}

/** Figures before and after an act. */
export const beforeAfter = (rows: readonly { name: string; before: string; after: string }[]): Content => ({
  table: { dontBreakRows: true, widths: ['*', 'auto', 'auto'], body: [['', 'before', 'after signing'].map((text, i): TableCell => ({ text, style: 'small', alignment: i === 0 ? 'left' : 'right' })), ...rows.map(({ name, before, after }): TableCell[] => [{ text: name }, { text: before, style: 'quiet', alignment: 'right' }, { text: after, style: 'sum', alignment: 'right' }])] },
  layout: { hLineWidth: (i) => (i === 0 ? 0 : 0.6), vLineWidth: () => 0, hLineColor: () => RULE, paddingLeft: () => 0, paddingRight: (i) => (i === 2 ? 0 : 18), paddingTop: () => 6, paddingBottom: () => 6 },
});
