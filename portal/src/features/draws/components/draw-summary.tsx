import type { Step } from '@tallypole/shared/arithmetic';
import { minus } from '@tallypole/shared/money';
import type { Draw } from '@tallypole/shared/schemas/draws';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { strings } from '../strings.ts';
import classes from './draws.module.css';

const words = strings.summary;

interface Row {
  label: string;
  cents: number;
  steps?: Step | undefined;
}

/** The sum down to due now, and who pays it; each figure opens its arithmetic. */
export function DrawSummary({ draw, forHomeowner = false }: { draw: Draw; forHomeowner?: boolean }) {
  const { summary, steps } = draw;
  const off = (cents: number) => minus(0, cents);
  const inside = (label: string) => steps.earnedToDate.inputs.find((input) => input.label === label);
  const within = (label: string) => steps.dueNow.inputs.find((input) => input.label === label);
  const rows: Row[] = [
    { label: words.contractSum, cents: summary.contractSumTodayCents, steps: steps.contractSumToday },
    { label: words.work, cents: summary.workInPlaceCents, steps: inside('Work in place') },
    { label: words.onHand, cents: summary.materialsOnHandCents, steps: inside('Materials on hand') },
    { label: words.retainage, cents: off(summary.retainageHeldCents), steps: steps.retainageHeld },
    { label: words.earned, cents: summary.earnedToDateCents, steps: steps.earnedToDate },
    { label: words.before, cents: off(summary.billedBeforeCents) },
    ...(summary.creditBeforeCents === 0 ? [] : [{ label: words.credit, cents: off(summary.creditBeforeCents) }]),
    ...(summary.depositUsedToDateCents === 0 ? [] : [{ label: words.deposit, cents: off(summary.depositUsedNowCents), steps: within('Deposit used in this draw') }]),
  ];
  return (
    <section className={classes['summary']} aria-label={words.title}>
      <h2>{words.title}</h2>
      <dl>
        {rows.map((row) => (
          <SummaryRow key={row.label} row={row} />
        ))}
        <div className={classes['due']}>
          <dt>{words.due}</dt>
          <dd className="sum">
            <Figure steps={steps.dueNow} label={words.due}>
              <Money cents={draw.dueCents} />
            </Figure>
          </dd>
        </div>
        <SummaryRow row={{ label: forHomeowner ? words.you : words.homeowner, cents: draw.homeownerCents, steps: steps.homeowner }} />
        {draw.lenderName === null ? null : <SummaryRow row={{ label: words.loan(draw.lenderName), cents: draw.loanCents, steps: steps.loan }} />}
        <SummaryRow row={{ label: words.left, cents: summary.leftToBillCents, steps: steps.leftToBill }} />
      </dl>
      {forHomeowner && summary.retainageHeldCents > 0 ? <p className="quiet">{words.retainageTerm}</p> : null}
    </section>
  );
}

const SummaryRow = ({ row }: { row: Row }) => (
  <div>
    <dt>{row.label}</dt>
    <dd>
      <Figure steps={row.steps} label={row.label}>
        <Money cents={row.cents} />
      </Figure>
    </dd>
  </div>
);
