import type { ReactNode } from 'react';

interface Props {
  title: string;
  /** One quiet sentence beside the title: how far, how many, for whom. */
  quiet?: string | undefined;
  /** The page that this one hangs from. */
  back?: { label: string; href: string } | undefined;
  /** The shop's larger face. */
  large?: boolean | undefined;
  /** The page's actions, at most one of them filled. */
  children?: ReactNode;
}

/** Title of a page with its quiet sentence and its actions. */
export function PageHead({ title, quiet, back, large = false, children }: Props) {
  return (
    <div className="mb-4">
      {back !== undefined && (
        <p className="text-quiet">
          <a href={back.href} className="inline-flex min-h-7 items-center">
            {back.label}
          </a>
        </p>
      )}
      <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-3">
        <div className="flex min-w-0 flex-wrap items-baseline gap-x-4 gap-y-1">
          <h1 className={large ? 'text-[2.25rem] leading-none lg:text-[2.875rem]' : undefined}>{title}</h1>
          {quiet !== undefined && <p className={large ? 'text-lg' : 'quiet'}>{quiet}</p>}
        </div>
        {children !== undefined && <div className="flex flex-wrap items-center gap-3">{children}</div>}
      </div>
    </div>
  );
}
