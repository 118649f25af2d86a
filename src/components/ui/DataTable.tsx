import type { TableOptions } from '@tanstack/react-table';
import {
  createColumnHelper,
  createSortedRowModel,
  metaHelper,
  rowSortingFeature,
  sortFn_alphanumeric,
  sortFn_datetime,
  sortFn_text,
  tableFeatures,
  useTable,
} from '@tanstack/react-table';
import type { ComponentProps, ReactNode } from 'react';
import { Pager } from './Pager';

interface ColumnMeta {
  /** Right-aligned, monospaced. */
  numeric?: boolean;
  /** Monospaced: serial numbers, lots. */
  mono?: boolean;
  /** Names the row for who hears the table. */
  rowHeader?: boolean;
}

const features = tableFeatures({
  rowSortingFeature,
  sortedRowModel: createSortedRowModel(),
  sortFns: { alphanumeric: sortFn_alphanumeric, datetime: sortFn_datetime, text: sortFn_text },
  columnMeta: metaHelper<ColumnMeta>(),
});

/**
 * Helper for columns at module scope: `const column = columnsFor<Row>()`, then
 * `column.columns([column.accessor('name', { header: 'Name', meta: { rowHeader: true } }), …])`.
 */
export function columnsFor<Row extends object>() {
  return createColumnHelper<typeof features, Row>();
}

interface Props<Row extends object> {
  /** What the table lists; read out, and shown by the heading above it. */
  caption: string;
  columns: TableOptions<typeof features, Row>['columns'];
  rows: Row[];
  rowId: (row: Row) => string;
  /** What stands there without rows: an `EmptyState`. */
  empty: ReactNode;
  /** Sorting by the server: heads are links. Without it the rows at hand are sorted here. */
  sort?: { by: string; desc: boolean; href: (by: string, desc: boolean) => string } | undefined;
  pager?: ComponentProps<typeof Pager> | undefined;
  /** Row that the page is about. */
  currentId?: string | undefined;
}

/** Rows to compare, dense, with heads that sort and pages that live in the URL. */
export function DataTable<Row extends object>(props: Props<Row>) {
  const { caption, columns, rows, rowId, empty, sort, pager, currentId } = props;
  const table = useTable({
    features,
    columns,
    data: rows,
    getRowId: rowId,
    enableSortingRemoval: false,
    enableMultiSort: false,
    sortDescFirst: false,
    manualSorting: sort !== undefined,
    ...(sort && { state: { sorting: [{ id: sort.by, desc: sort.desc }] } }),
  });
  if (rows.length === 0) return <>{empty}</>;
  return (
    <>
      <div className="table-frame" role="region" aria-label={caption} tabIndex={0}>
        <table className="table">
          <caption className="sr-only">{caption}</caption>
          <thead>
            {table.getHeaderGroups().map((group) => (
              <tr key={group.id}>
                {group.headers.map((header) => {
                  const { column } = header;
                  const sorted = column.getIsSorted();
                  const content = <table.FlexRender header={header} />;
                  return (
                    <th
                      key={header.id}
                      scope="col"
                      className={column.columnDef.meta?.numeric ? 'num' : undefined}
                      aria-sort={column.getCanSort() ? ariaSort(sorted) : undefined}
                    >
                      {!column.getCanSort() ? (
                        content
                      ) : sort ? (
                        <a className="sort" href={sort.href(column.id, sorted === 'asc')}>
                          {content}
                          <Direction sorted={sorted} />
                        </a>
                      ) : (
                        <button type="button" className="sort" onClick={column.getToggleSortingHandler()}>
                          {content}
                          <Direction sorted={sorted} />
                        </button>
                      )}
                    </th>
                  );
                })}
              </tr>
            ))}
          </thead>
          <tbody>
            {table.getRowModel().rows.map((row) => (
              <tr key={row.id} aria-current={row.id === currentId ? 'true' : undefined}>
                {row.getAllCells().map((cell) => {
                  const meta = cell.column.columnDef.meta;
                  const content = <table.FlexRender cell={cell} />;
                  if (meta?.rowHeader) {
                    return (
                      <th key={cell.id} scope="row" className={meta.mono ? 'font-mono' : undefined}>
                        {content}
                      </th>
                    );
                  }
                  return (
                    <td key={cell.id} className={meta?.numeric ? 'num' : meta?.mono ? 'mono' : undefined}>
                      {content}
                    </td>
                  );
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {pager && <Pager {...pager} />}
    </>
  );
}

function ariaSort(sorted: 'asc' | 'desc' | false): 'ascending' | 'descending' | 'none' {
  if (sorted === 'asc') return 'ascending';
  return sorted === 'desc' ? 'descending' : 'none';
}

function Direction({ sorted }: { sorted: 'asc' | 'desc' | false }) {
  return (
    <svg viewBox="0 0 8 8" width="8" height="8" aria-hidden="true" className="shrink-0 fill-current">
      {sorted === 'asc' && <path d="M0 7h8L4 1z" />}
      {sorted === 'desc' && <path d="M0 1h8L4 7z" />}
    </svg>
  );
}
