import type { ReactNode } from 'react';

/** A paragraph of quiet text. */
export function Quiet({ children }: { children: ReactNode }) {
  return <p className="quiet">{children}</p>;
}
