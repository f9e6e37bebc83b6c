import { Button, Skeleton } from '@mantine/core';
import { useEffect, useRef, type ReactNode } from 'react';
import { Problem } from '../lib/problem.ts';
import { useTitle } from '../lib/use-title.ts';
import { SecondStepLink } from './second-step-link.tsx';
import classes from './page.module.css';

/** The page's heading, which is also its title; takes focus when the page opens, so that a screen reader begins there. */
export function PageHead({ title, children }: { title: string; children?: ReactNode }) {
  useTitle(title);
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => heading.current?.focus({ preventScroll: true }), []);
  return (
    <header className={classes['head']}>
      <h1 ref={heading} tabIndex={-1}>
        {title}
      </h1>
      {children}
    </header>
  );
}

/** A part of a page under its own heading, parted by a thin rule. */
export const Section = ({ title, children, ruled = true }: { title: string; children: ReactNode; ruled?: boolean }) => (
  <section className={`${classes['section'] ?? ''} ${ruled ? (classes['ruled'] ?? '') : ''}`} aria-label={title}>
    <h2>{title}</h2>
    {children}
  </section>
);

/** Nothing here yet: says what will be, and offers the act that fills it. */
export const EmptyState = ({ children, action }: { children: ReactNode; action?: ReactNode }) => (
  <div className={classes['empty']}>
    <p className="quiet">{children}</p>
    {action}
  </div>
);

/** What happened, what was kept, and what to do. */
export function FailureState({ error, onRetry }: { error: unknown; onRetry?: () => void }) {
  const problem = error instanceof Problem ? error : null;
  return (
    <div className={classes['failure']} role="alert">
      <p>{problem?.message ?? 'Sorry, something went wrong on our side. Nothing was changed.'}</p>
      <SecondStepLink error={problem} />
      {problem?.requestId ? <p className="quiet">Reference {problem.requestId}</p> : null}
      {onRetry ? (
        <Button variant="outline" onClick={onRetry}>
          Try again
        </Button>
      ) : null}
    </div>
  );
}

/** While a page loads. */
export const LoadingState = ({ lines = 5 }: { lines?: number }) => (
  <div role="status" aria-label="Loading" style={{ display: 'grid', gap: 12 }}>
    <Skeleton height={34} width="60%" />
    {Array.from({ length: lines }, (_, i) => (
      <Skeleton key={i} height={18} />
    ))}
  </div>
);

/** A caution beside the text. */
export const Note = ({ children }: { children: ReactNode }) => <div className={classes['note']}>{children}</div>;

export interface Effect {
  name: string;
  before: ReactNode;
  after: ReactNode;
}

/** Figures before and after an act. */
export const Effects = ({ effects }: { effects: readonly Effect[] }) => (
  <dl className={classes['effects']}>
    {effects.map(({ name, before, after }) => (
      <div key={name}>
        <dt>{name}</dt>
        <dd className="quiet">{before}</dd>
        <dd className={classes['after']}>{after}</dd>
      </div>
    ))}
  </dl>
);

export interface ActRowProps {
  tag: ReactNode;
  title: ReactNode;
  children?: ReactNode;
  sum?: ReactNode;
  action: ReactNode;
}

/** One thing that waits for somebody: what it is, how much, and the button. */
export const ActRow = ({ tag, title, children, sum, action }: ActRowProps) => (
  <div className={classes['act']}>
    <div>
      {tag}
      <h2 style={{ marginTop: 8 }}>{title}</h2>
      <div className="quiet">{children}</div>
    </div>
    <div className={classes['actSide']}>
      {sum === undefined ? null : <div className="sum">{sum}</div>}
      {action}
    </div>
  </div>
);
