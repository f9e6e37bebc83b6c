import { formatMoney } from '@tallypole/shared/money';
import type { Band, PoleRow } from '@tallypole/shared/pole';
import classes from './pole.module.css';

export interface BandFactsProps {
  band: Band;
  row: PoleRow | undefined;
  prices: boolean;
}

/** What one band says: its name, how far it is, its figures and the changes that land in it. */
export const BandFacts = ({ band, row, prices }: BandFactsProps) => (
  <>
    <strong>{band.name}</strong>, {band.caption}
    {row && prices ? (
      <dl className={classes['figures']}>
        <dt>Scheduled</dt>
        <dd>{formatMoney(row.scheduledCents)}</dd>
        <dt>Proven</dt>
        <dd>{formatMoney(row.provenCents)}</dd>
        <dt>Billed</dt>
        <dd>{formatMoney(row.billedCents)}</dd>
        <dt>Paid</dt>
        <dd>{formatMoney(row.paidCents)}</dd>
      </dl>
    ) : null}
    {band.notches.map((notch) => (
      <span key={notch.id} className={classes['change']}>
        {notch.label}
        {notch.pending ? ', not decided yet' : ''}
      </span>
    ))}
  </>
);
