import {
  columnVisibilityFeature, createSortedRowModel, rowSortingFeature, sortFns, tableFeatures, useTable, type ColumnDef, type RowData,
} from '@tanstack/react-table';
import clsx from 'clsx';
import { useMemo, useState, type ReactNode } from 'react';

const features = tableFeatures({ rowSortingFeature, columnVisibilityFeature, sortedRowModel: createSortedRowModel(), sortFns });

export interface DataColumn<Row> {
  key: string;
  /** Column head; `unit` stands under it. */
  head: ReactNode;
  unit?: ReactNode;
  /** What the cell shows. */
  cell: (row: Row) => ReactNode;
  /** What the column sorts by; without it the column does not sort. Null sorts last. */
  sortBy?: (row: Row) => string | number | null;
  numeric?: boolean;
  width?: number | string;
  className?: string;
}

interface DataTableProps<Row> {
  /** Read by screen readers before the table. */
  caption: string;
  columns: readonly DataColumn<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  /** Keys of hidden columns. */
  hidden?: ReadonlySet<string>;
  initialSort?: { key: string; descending?: boolean };
  /** Told of every change of the sort, for pages that keep it in the address. */
  onSort?: (sort: { key: string; descending: boolean } | null) => void;
  className?: string;
  rowClass?: (row: Row) => string | undefined;
  /** Shown instead of rows when there are none. */
  empty?: ReactNode;
}

/** A sortable table. Sorting is by the head's button; the state is spoken by aria-sort. */
export function DataTable<Row extends RowData>({ caption, columns, rows, rowKey, hidden, initialSort, onSort, className, rowClass, empty }: DataTableProps<Row>) {
  const [sorting, setSorting] = useState(() => (initialSort ? [{ id: initialSort.key, desc: initialSort.descending ?? false }] : []));
  const definitions = useMemo<ColumnDef<typeof features, Row>[]>(
    () =>
      columns.map((c) => ({
        id: c.key,
        accessorFn: (row: Row) => c.sortBy?.(row) ?? undefined,
        enableSorting: c.sortBy !== undefined,
        sortUndefined: 'last' as const,
      })),
    [columns],
  );
  const columnVisibility = useMemo(() => Object.fromEntries([...(hidden ?? [])].map((key) => [key, false])), [hidden]);
  const data = useMemo(() => [...rows], [rows]);
  const table = useTable({
    features, columns: definitions, data, getRowId: (row: Row) => rowKey(row), state: { sorting, columnVisibility },
    onSortingChange: (update) => {
      const next = typeof update === 'function' ? update(sorting) : update;
      setSorting(next);
      onSort?.(next[0] ? { key: next[0].id, descending: next[0].desc } : null);
    },
  });
  const byKey = new Map(columns.map((c) => [c.key, c]));
  const shown = columns.filter((c) => !hidden?.has(c.key));
  return (
    <table className={className}>
      <caption className="vh">{caption}</caption>
      <thead>
        <tr>
          {table.getHeaderGroups()[0]?.headers.map((header) => {
            const column = byKey.get(header.column.id);
            if (!column) return null;
            const sorted = column.sortBy ? header.column.getIsSorted() : false;
            return (
              <th
                key={header.id}
                scope="col"
                className={clsx(column.numeric && 'num', column.className)}
                style={column.width === undefined ? undefined : { width: column.width }}
                aria-sort={sorted ? (sorted === 'asc' ? 'ascending' : 'descending') : undefined}
              >
                {column.sortBy ? (
                  <button type="button" className="sort" onClick={header.column.getToggleSortingHandler()}>
                    {column.head}
                    <i aria-hidden="true">{sorted === 'asc' ? '\u2191' : sorted === 'desc' ? '\u2193' : ''}</i>
                  </button>
                ) : (
                  column.head
                )}
                {column.unit ? <span>{column.unit}</span> : null}
              </th>
            );
          })}
        </tr>
      </thead>
      <tbody>
        {table.getRowModel().rows.map((row) => (
          <tr key={row.id} className={rowClass?.(row.original)}>
            {shown.map((c) => (
              <td key={c.key} className={clsx(c.numeric && 'num', c.className)}>{c.cell(row.original)}</td>
            ))}
          </tr>
        ))}
        {rows.length === 0 && empty ? <tr><td colSpan={shown.length}>{empty}</td></tr> : null}
      </tbody>
    </table>
  );
}
