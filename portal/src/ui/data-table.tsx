import type { ReactNode } from 'react';
import classes from './page.module.css';

export interface Column<Row> {
  key: string;
  head: string;
  /** Numbers stand on the right. */
  right?: boolean;
  cell: (row: Row) => ReactNode;
}

export interface DataTableProps<Row> {
  caption: string;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  footer?: ReactNode;
}

/** A plain table: its caption for screen readers, the first column as row heads; scrolls by itself on a narrow screen. */
export function DataTable<Row>({ caption, columns, rows, rowKey, footer }: DataTableProps<Row>) {
  return (
    <div className={classes['tableScroll']} tabIndex={0} role="group" aria-label={caption}>
      <table className={classes['table']}>
        <caption className="visually-hidden">{caption}</caption>
        <thead>
          <tr>
            {columns.map(({ key, head, right }) => (
              <th key={key} scope="col" className={right ? classes['right'] : undefined}>
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={rowKey(row)}>
              {columns.map(({ key, right, cell }, i) =>
                i === 0 ? (
                  <th key={key} scope="row">
                    {cell(row)}
                  </th>
                ) : (
                  <td key={key} className={right ? classes['right'] : undefined}>
                    {cell(row)}
                  </td>
                ),
              )}
            </tr>
          ))}
        </tbody>
        {footer ? <tfoot>{footer}</tfoot> : null}
      </table>
    </div>
  );
}
