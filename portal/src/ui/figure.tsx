import { Drawer, Popover } from '@mantine/core';
import { useMediaQuery } from '@mantine/hooks';
import type { Step } from '@tallypole/shared/arithmetic';
import { useState, type ReactNode } from 'react';
import { Arithmetic } from './arithmetic.tsx';
import classes from './figure.module.css';

export interface FigureProps {
  /** The figure as printed, usually <Money/>. */
  children: ReactNode;
  /** Its arithmetic; without it the figure is plain. */
  steps: Step | null | undefined;
  /** What the figure is, for a screen reader: "Due now". */
  label: string;
}

/** A figure that opens its arithmetic: beside it on a desk, from below on a phone. */
export function Figure({ children, steps, label }: FigureProps) {
  const [opened, setOpened] = useState(false);
  const phone = useMediaQuery('(max-width: 47.99em)', false);
  if (!steps) return <>{children}</>;
  const button = (
    <button type="button" className={classes['open']} aria-haspopup="dialog" aria-expanded={opened} onClick={() => setOpened(!opened)}>
      {children}
      <span className="visually-hidden">, {label}: how it is worked out</span>
    </button>
  );
  if (phone) {
    return (
      <>
        {button}
        <Drawer opened={opened} onClose={() => setOpened(false)} position="bottom" size="auto" title={label} closeButtonProps={{ 'aria-label': 'Close' }}>
          <Arithmetic step={steps} />
        </Drawer>
      </>
    );
  }
  return (
    <Popover opened={opened} onChange={setOpened} width={440} position="bottom-end" withArrow shadow="md" trapFocus returnFocus>
      <Popover.Target popupType="dialog">{button}</Popover.Target>
      <Popover.Dropdown style={{ maxHeight: '60vh', overflow: 'auto' }} tabIndex={0}>
        <Arithmetic step={steps} />
      </Popover.Dropdown>
    </Popover>
  );
}
