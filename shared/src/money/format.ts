import { cents, type BasisPoints, type Cents } from './cents.ts';

const MINUS = '−';

/** $486,500.00; a negative amount carries a real minus sign: −$250.00. */
export function formatMoney(amount: Cents): string {
  return `${amount < 0 ? MINUS : ''}$${digits(amount)}`;
}

/** As a change: always with its sign, +$3,912.40, −$250.00; zero is +$0.00. */
export function formatChange(amount: Cents): string {
  return `${amount < 0 ? MINUS : '+'}$${digits(amount)}`;
}

/** Without the currency sign, for columns that name it once: 486,500.00. */
export function formatAmount(amount: Cents): string {
  return `${amount < 0 ? MINUS : ''}${digits(amount)}`;
}

/** 725 is "7.25 %", 1000 is "10 %". Throws InvalidInput for a fraction of a basis point. */
export function formatRate(rate: BasisPoints): string {
  const size = Math.abs(cents(rate, 'rate'));
  const fraction = String(size % 100).padStart(2, '0').replace(/0+$/, '');
  return `${rate < 0 ? MINUS : ''}${Math.trunc(size / 100)}${fraction === '' ? '' : `.${fraction}`} %`;
}

function digits(amount: Cents): string {
  const size = String(Math.abs(cents(amount))).padStart(3, '0');
  return `${size.slice(0, -2).replace(/\B(?=(\d{3})+$)/g, ',')}.${size.slice(-2)}`;
}
