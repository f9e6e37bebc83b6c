import type { Figure } from '../arithmetic/index.ts';
import { formatMoney, formatRate } from './format.ts';

/** A figure of any kind as a page or a paper prints it; how dates are written is the caller's. */
export function formatFigure(figure: Figure, writtenDate: (date: string) => string): string {
  switch (figure.kind) {
    case 'money':
      return formatMoney(figure.cents);
    case 'rate':
      return formatRate(figure.basisPoints);
    case 'quantity':
      return `${figure.value} ${figure.unit}`;
    case 'date':
      return writtenDate(figure.date);
    case 'text':
      return figure.text;
  }
}
