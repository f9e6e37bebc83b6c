import type { ReactNode } from 'react';
import classes from './state-tag.module.css';

/** waits: for a person; settled: agreed, paid, effective; refused: declined, failed, past due; neutral: everything else. */
export type Meaning = 'waits' | 'settled' | 'refused' | 'neutral';

/** A state in words; the color only repeats them. */
export const StateTag = ({ meaning, children }: { meaning: Meaning; children: ReactNode }) => <span className={`${classes['tag'] ?? ''} ${classes[meaning] ?? ''}`}>{children}</span>;
