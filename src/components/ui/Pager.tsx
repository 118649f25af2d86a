interface Props {
  /** From 1. */
  page: number;
  pageCount: number;
  /** Address of a page: the page lives in the URL. */
  href: (page: number) => string;
}

/** Links to the page before and after; nothing where there is one page. */
export function Pager({ page, pageCount, href }: Props) {
  if (pageCount <= 1) return null;
  return (
    <nav aria-label="Pages" className="mt-2 flex min-h-11 flex-wrap items-center gap-x-5">
      <Step label="Previous" to={page > 1 ? href(page - 1) : undefined} rel="prev" />
      <span className="quiet">
        Page {page} of {pageCount}
      </span>
      <Step label="Next" to={page < pageCount ? href(page + 1) : undefined} rel="next" />
    </nav>
  );
}

function Step({ label, to, rel }: { label: string; to: string | undefined; rel: 'prev' | 'next' }) {
  if (to === undefined) return <span className="text-ink-2">{label}</span>;
  return (
    <a href={to} rel={rel} className="inline-flex min-h-11 items-center">
      {label}
    </a>
  );
}
