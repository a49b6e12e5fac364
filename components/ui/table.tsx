import type { ReactNode } from 'react';
import { classes } from './classes';

export interface TableColumn {
  label: string;
  isNumber?: boolean;
  /** The column that names the row. */
  isRowHead?: boolean;
}

export interface TableRow {
  key: string | number;
  cells: ReactNode[];
  isStruck?: boolean;
}

export interface TableProps {
  caption: ReactNode;
  isCaptionHidden?: boolean;
  columns: TableColumn[];
  rows: TableRow[];
  /** Said in place of rows. */
  emptyText?: string;
  /** Wide tables of figures may scroll sideways on a phone instead of being stacked. */
  isScrolled?: boolean;
}

/** On a phone each row is stacked with its column labels; roles are spelled out because `display: block` drops them. */
export function Table({ caption, isCaptionHidden, columns, rows, emptyText, isScrolled }: TableProps) {
  const stack = !isScrolled;
  if (rows.length === 0 && emptyText) return <p className="tag">{emptyText}</p>;
  return (
    <div
      className={isScrolled ? 'overflow-x-auto' : undefined}
      {...(isScrolled
        ? { role: 'region', tabIndex: 0, 'aria-label': typeof caption === 'string' ? caption : 'Table' }
        : {})}
    >
      <table role="table" className={classes('w-full border-collapse text-left', stack && 'max-md:block')}>
        <caption className={isCaptionHidden ? 'sr-only' : 'figure mb-2 text-left text-xl max-md:block'}>
          {caption}
        </caption>
        <thead role="rowgroup" className={stack ? 'max-md:sr-only' : ''}>
          <tr role="row">
            {columns.map((column) => (
              <th
                key={column.label}
                role="columnheader"
                scope="col"
                className={classes('border-b border-edge py-1.5 pr-4 align-bottom', column.isNumber && 'text-right')}
              >
                <span className="label">{column.label}</span>
              </th>
            ))}
          </tr>
        </thead>
        <tbody role="rowgroup" className={stack ? 'max-md:block' : ''}>
          {rows.map((row) => (
            <tr
              key={row.key}
              role="row"
              className={classes('border-b border-line', stack && 'max-md:block max-md:py-2')}
            >
              {columns.map((column, index) => {
                const Cell = column.isRowHead ? 'th' : 'td';
                return (
                  <Cell
                    key={column.label}
                    role={column.isRowHead ? 'rowheader' : 'cell'}
                    {...(column.isRowHead ? { scope: 'row' as const } : {})}
                    className={classes(
                      'py-2.5 pr-4 align-top font-normal',
                      column.isRowHead && 'font-medium',
                      column.isNumber && 'font-medium tabular-nums md:text-right',
                      row.isStruck && column.isRowHead && 'text-soft line-through decoration-[1.5px]',
                      stack && 'max-md:grid max-md:grid-cols-[8.5rem_1fr] max-md:gap-3 max-md:py-1 max-md:pr-0',
                    )}
                  >
                    {stack ? (
                      <span aria-hidden="true" className="label pt-1 md:hidden">
                        {column.label}
                      </span>
                    ) : null}
                    <span className="min-w-0">{row.cells[index]}</span>
                  </Cell>
                );
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
