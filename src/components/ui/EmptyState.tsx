import type { ReactNode } from 'react';

interface Props {
  /** What will be here. */
  title: string;
  /** How to begin. */
  text?: string | undefined;
  /** The link or button that begins it. */
  children?: ReactNode;
}

/** Stands where nothing is yet. */
export function EmptyState({ title, text, children }: Props) {
  return (
    <div className="grid justify-items-start gap-2 border border-dashed border-rule px-4 py-6">
      <p className="font-semibold">{title}</p>
      {text !== undefined && <p className="max-w-prose text-ink-2">{text}</p>}
      {children}
    </div>
  );
}
