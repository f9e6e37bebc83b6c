import type { Origin, Step } from '@tallypole/shared/arithmetic';
import { formatFigure } from '@tallypole/shared/money';
import { Link, useParams } from 'react-router-dom';
import { writtenDate } from '../lib/dates.ts';
import { originPath } from '../lib/origin-path.ts';
import classes from './figure.module.css';

/** The steps of a computation down to the given figures; deeper levels open one by one. */
export default function Arithmetic({ step }: { step: Step }) {
  return (
    <ul className={classes['steps']}>
      <StepItem step={step} open />
    </ul>
  );
}

function StepItem({ step, open = false }: { step: Step; open?: boolean }) {
  const head = (
    <span className={classes['head']}>
      <span>
        {step.label}
        {step.origin ? <From origin={step.origin} of={step.label} /> : null}
      </span>
      <span className="number">{formatFigure(step.result, (date) => writtenDate(date))}</span>
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

/** The record that a given figure was taken from. */
function From({ origin, of }: { origin: Origin; of: string }) {
  const { jobId } = useParams();
  const path = originPath(origin, jobId);
  // the label often names the record already
  const named = of.startsWith(origin.label);
  if (path === null) return named ? null : <span className={classes['from']}>{origin.label}</span>;
  return (
    <span className={classes['from']}>
      <Link to={path}>
        {named ? 'Look it up' : origin.label}
        {named ? <span className="visually-hidden">: {origin.label}</span> : null}
      </Link>
    </span>
  );
}
