import { useMemo, useState, type ReactNode } from 'react';
import { classNames } from '../lib/class-names';
import { Icon } from './icon';

export type Column<Row> = {
  key: string;
  header: ReactNode;
  cell: (row: Row) => ReactNode;
  align?: 'start' | 'end';
  /** Makes the column sortable. Empty values go last either way. */
  sortValue?: (row: Row) => string | number | null;
  className?: string;
};

type DataTableProps<Row> = {
  /** Names the table for those who hear it; shown only when `isCaptionShown`. */
  caption: string;
  isCaptionShown?: boolean;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  /** Opens a row. The first column becomes its button, the whole row takes the pointer. */
  onRow?: (row: Row) => void;
  selectedKey?: string | null;
  /** Said in place of rows. */
  empty?: ReactNode;
};

type Order = { key: string; isDown: boolean } | null;

function sorted<Row>(rows: readonly Row[], column: Column<Row> | undefined, isDown: boolean): readonly Row[] {
  const valueOf = column?.sortValue;
  if (!valueOf) return rows;
  return [...rows].sort((a, b) => {
    const left = valueOf(a);
    const right = valueOf(b);
    if (left === null || right === null) return left === right ? 0 : left === null ? 1 : -1;
    const order = typeof left === 'number' && typeof right === 'number' ? left - right : String(left).localeCompare(String(right), 'en', { numeric: true });
    return isDown ? -order : order;
  });
}

export function DataTable<Row>({ caption, isCaptionShown = false, columns, rows, rowKey, onRow, selectedKey = null, empty }: DataTableProps<Row>) {
  const [order, setOrder] = useState<Order>(null);
  const shown = useMemo(() => sorted(rows, columns.find((column) => column.key === order?.key), order?.isDown ?? false), [rows, columns, order]);
  const turn = (key: string) => setOrder((now) => (now?.key !== key ? { key, isDown: false } : now.isDown ? null : { key, isDown: true }));

  return (
    <div className="overflow-x-auto" role="region" aria-label={caption} tabIndex={0}>
      <table className="w-full border-collapse text-left">
        <caption className={isCaptionShown ? 'pb-2 text-left font-semibold' : 'sr-only'}>{caption}</caption>
        <thead>
          <tr className="border-b border-edge">
            {columns.map((column) => (
              <HeaderCell key={column.key} column={column} order={order} onTurn={turn} />
            ))}
          </tr>
        </thead>
        <tbody>
          {shown.map((row) => {
            const key = rowKey(row);
            return (
              <tr key={key} aria-current={selectedKey === key || undefined} onClick={onRow ? () => onRow(row) : undefined} className={classNames('border-b border-rule align-top', onRow && 'cursor-pointer hover:bg-sheet', selectedKey === key && 'bg-kingfisher-wash')}>
                {columns.map((column, i) => (
                  <td key={column.key} className={classNames('py-2.5 pr-5 last:pr-0', column.align === 'end' && 'text-right whitespace-nowrap', column.className)}>
                    {i === 0 && onRow ? (
                      <button
                        type="button"
                        className="min-h-6 text-left font-semibold text-kingfisher underline underline-offset-2 pointer-coarse:min-h-11"
                        onClick={(event) => {
                          event.stopPropagation();
                          onRow(row);
                        }}
                      >
                        {column.cell(row)}
                      </button>
                    ) : (
                      column.cell(row)
                    )}
                  </td>
                ))}
              </tr>
            );
          })}
          {shown.length === 0 && empty !== undefined && (
            <tr>
              <td colSpan={columns.length} className="py-6 text-ink2">
                {empty}
              </td>
            </tr>
          )}
        </tbody>
      </table>
    </div>
  );
}

function HeaderCell<Row>({ column, order, onTurn }: { column: Column<Row>; order: Order; onTurn: (key: string) => void }) {
  const isOrdered = order?.key === column.key;
  const end = column.align === 'end';
  return (
    <th scope="col" aria-sort={isOrdered ? (order.isDown ? 'descending' : 'ascending') : undefined} className={classNames('py-2 pr-5 align-bottom text-note font-semibold text-ink2 last:pr-0', end && 'text-right')}>
      {column.sortValue ? (
        <button type="button" onClick={() => onTurn(column.key)} className={classNames('-my-1 inline-flex items-center gap-1 py-1 hover:text-kingfisher pointer-coarse:min-h-11', isOrdered && 'text-ink')}>
          {column.header}
          {isOrdered && <Icon name={order.isDown ? 'down' : 'up'} className="size-3.5" />}
        </button>
      ) : (
        column.header
      )}
    </th>
  );
}
