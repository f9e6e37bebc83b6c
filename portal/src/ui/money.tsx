import { formatChange, formatMoney } from '@tallypole/shared/money';

/** A sum as it is printed everywhere: $486,500.00, −$250.00; unknown is a dash. */
export const Money = ({ cents }: { cents: number | null }) => <span className="number">{cents === null ? '–' : formatMoney(cents)}</span>;

/** A change of a sum, always with its sign. */
export const MoneyChange = ({ cents }: { cents: number }) => <span className="number">{formatChange(cents)}</span>;
