import type { Figure as FigureValue, Step } from '@tallypole/shared/arithmetic';
import { formatMoney, formatRate } from '@tallypole/shared/money';
import { writtenDate } from '../lib/dates.ts';
import classes from './figure.module.css';

/** A figure of any kind as text. */
export function printFigure(figure: FigureValue): string {
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

/** The steps of a computation down to the given figures; deeper levels open one by one. */
export function Arithmetic({ step }: { step: Step }) {
  return (
    <ul className={classes['steps']}>
      <StepItem step={step} open />
    </ul>
  );
}

function StepItem({ step, open = false }: { step: Step; open?: boolean }) {
  const head = (
    <span className={classes['head']}>
      <span>{step.label}</span>
      <span className="number">{printFigure(step.result)}</span>
    </span>
  );
  const rule = step.rule === 'given' ? null : (
    <p className={classes['rule']}>
      {step.rule}
      {step.exact === undefined ? '' : `; exactly ${step.exact} before rounding`}
    </p>
  );
  if (step.inputs.length === 0) {
    return (
      <li className={classes['step']}>
        {head}
        {rule}
      </li>
    );
  }
  return (
    <li className={classes['step']}>
      <details open={open}>
        <summary>{head}</summary>
        {rule}
        <ul>
          {step.inputs.map((input, i) => (
            <StepItem key={`${i} ${input.label}`} step={input} />
          ))}
        </ul>
      </details>
    </li>
  );
}
