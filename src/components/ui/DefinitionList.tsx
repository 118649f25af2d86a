import { Fragment } from 'react';
import type { ReactNode } from 'react';

interface Props {
  items: readonly {
    term: string;
    value: ReactNode;
    href?: string | undefined;
    /** Monospaced face: numbers with units, serial numbers, lots. */
    mono?: boolean | undefined;
  }[];
}

/** Facts, a term beside each. */
export function DefinitionList({ items }: Props) {
  return (
    <dl className="grid grid-cols-[minmax(5rem,auto)_minmax(0,1fr)] gap-x-4 gap-y-1 text-[0.9375rem] leading-snug">
      {items.map(({ term, value, href, mono = false }) => (
        <Fragment key={term}>
          <dt className="text-ink-2">{term}</dt>
          <dd className={`wrap-anywhere ${mono ? 'font-mono' : ''}`}>
            {href === undefined ? value : <a href={href}>{value}</a>}
          </dd>
        </Fragment>
      ))}
    </dl>
  );
}
