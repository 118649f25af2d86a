import { DataTable, columnsFor } from '~/components/ui/DataTable';
import { EmptyState } from '~/components/ui/EmptyState';
import { Money } from '~/components/ui/Money';
import { paths } from '~/lib/paths';
import type { PartRow } from '~/server/queries/stores/list-parts';
import { quantityText, traceWords } from './quantity';

const column = columnsFor<PartRow>();

const number = column.accessor('number', {
  header: 'Part',
  meta: { rowHeader: true, mono: true },
  cell: ({ getValue }) => (
    <a href={paths.part(getValue())} className="inline-flex min-h-(--row) items-center whitespace-nowrap">
      {getValue()}
    </a>
  ),
});
const description = column.accessor('description', { header: 'Description' });
const value = column.accessor('value', { header: 'Value', meta: { mono: true }, enableSorting: false });
const trace = column.accessor(({ trace: how }) => traceWords[how], {
  id: 'trace',
  header: 'Traced',
  enableSorting: false,
});
const usable = column.accessor('usable', {
  header: 'Usable',
  meta: { numeric: true },
  cell: ({ row }) => quantityText(row.original.usable, row.original.unit),
});
const onHand = column.accessor('onHand', {
  header: 'On hand',
  meta: { numeric: true },
  cell: ({ row }) => quantityText(row.original.onHand, row.original.unit),
});
const usedIn = column.accessor(({ usedIn: models }) => models.join(', '), {
  id: 'usedIn',
  header: 'Used in',
  enableSorting: false,
});

const stockValue = (currency: string) =>
  column.accessor('valueMinor', {
    header: 'Value of stock',
    meta: { numeric: true },
    enableSorting: false,
    cell: ({ getValue }) => {
      const minor = getValue();
      return minor === null ? '' : <Money minor={minor} currency={currency} inFull />;
    },
  });

interface Props {
  rows: PartRow[];
  q: string | undefined;
  sort: { by: string; desc: boolean };
  page: number;
  pageCount: number;
  /** Set for who may see what the stock is worth. */
  currency: string | undefined;
}

/** The parts of the books with what is on hand; search, order and page live in the URL. */
export function PartTable({ rows, q, sort, page, pageCount, currency }: Props) {
  const money = currency === undefined ? [] : [stockValue(currency)];
  const href = (by: string, desc: boolean, to = 1) =>
    paths.stores({ q, sort: by, desc: desc ? 'yes' : undefined, page: String(to) });
  return (
    <DataTable
      caption="Parts with what is on hand"
      columns={column.columns([number, description, value, trace, usable, onHand, ...money, usedIn])}
      rows={rows}
      rowId={(row) => row.number}
      empty={
        q === undefined ? (
          <EmptyState title="Parts will stand here" text="Enter the first one below, then receive it." />
        ) : (
          <EmptyState
            title="No part is named like that"
            text="Search for a part of its number, description or value."
          />
        )
      }
      sort={{ ...sort, href }}
      pager={{ page, pageCount, href: (to) => href(sort.by, sort.desc, to) }}
    />
  );
}
