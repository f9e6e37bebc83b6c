import type { ReactNode } from 'react';
import classes from './page.module.css';

export interface ListedRow {
  key: string;
  name: ReactNode;
  /** What is said of it, in one line where there is room. */
  facts: readonly ReactNode[];
  acts?: ReactNode;
}

/** Rows that something can be done with: name and facts, and the buttons beside them or, on a phone, below. */
export const RowList = ({ label, rows }: { label: string; rows: readonly ListedRow[] }) => (
  <ul className={classes['rows']} aria-label={label}>
    {rows.map(({ key, name, facts, acts }) => (
      <li key={key}>
        <div>
          <strong>{name}</strong>
          <div className={classes['rowFacts']}>
            {facts.map((fact, i) => (
              <span key={i}>{fact}</span>
            ))}
          </div>
        </div>
        {acts ? <div className={classes['rowActs']}>{acts}</div> : null}
      </li>
    ))}
  </ul>
);
