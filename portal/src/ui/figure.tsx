import type { Step } from '@tallypole/shared/arithmetic';
import { lazy, Suspense, useState, type ReactNode } from 'react';
import { Popup } from './popup.tsx';
import classes from './figure.module.css';

export interface FigureProps {
  /** The figure as printed, usually <Money/>. */
  children: ReactNode;
  /** Its arithmetic; without it the figure is plain. */
  steps: Step | null | undefined;
  /** What the figure is, for a screen reader: "Due now". */
  label: string;
}

const Arithmetic = lazy(() => import('./arithmetic.tsx'));
const WIDTH = 440;

/** A figure that opens its arithmetic: beside it on a desk, from below on a phone. */
export function Figure({ children, steps, label }: FigureProps) {
  const [opened, setOpened] = useState(false);
  if (!steps) return <>{children}</>;
  const button = (
    <button type="button" className={classes['open']} aria-haspopup="dialog" aria-expanded={opened} onClick={() => setOpened(!opened)}>
      {children}
      <span className="visually-hidden">, {label}: how it is worked out</span>
    </button>
  );
  return (
    <Popup label={`${label}: how it is worked out`} button={button} opened={opened} onClose={() => setOpened(false)} width={WIDTH}>
      <Suspense fallback="…">
        <Arithmetic step={steps} />
      </Suspense>
    </Popup>
  );
}
