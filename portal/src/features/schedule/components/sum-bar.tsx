import { Button } from '@mantine/core';
import { formatMoney, minus } from '@tallypole/shared/money';
import type { DraftCheck } from '@tallypole/shared/schedule-of-values';
import { Money } from '../../../ui/money.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { strings } from '../strings.ts';
import classes from './schedule.module.css';

interface SumBarProps {
  check: DraftCheck;
  lines: number;
  busy: boolean;
  onImport: () => void;
}

/** What the lines add up to against the contract sum, always in view, with the button that imports. */
export function SumBar({ check, lines, busy, onImport }: SumBarProps) {
  const { sumCents, contractSumCents, differenceCents } = check;
  return (
    <div className={classes['bar']}>
      <dl>
        <div>
          <dt>{strings.sumOfLines}</dt>
          <dd><Money cents={sumCents} /></dd>
        </div>
        <div>
          <dt>{strings.contractSum}</dt>
          <dd><Money cents={contractSumCents} /></dd>
        </div>
      </dl>
      <div role="status">
        {differenceCents === 0 ? (
          <StateTag meaning="settled">{strings.agrees}</StateTag>
        ) : (
          <StateTag meaning="refused">
            {differenceCents > 0 ? `${formatMoney(differenceCents)} ${strings.missing}` : `${formatMoney(minus(0, differenceCents))} ${strings.tooMuch}`}
          </StateTag>
        )}
      </div>
      <Button onClick={onImport} loading={busy}>{strings.submit(lines)}</Button>
    </div>
  );
}
