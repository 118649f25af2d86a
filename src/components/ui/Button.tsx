import type { ButtonHTMLAttributes, ReactNode } from 'react';
import { useId } from 'react';

interface Look {
  /** One filled button a view; the rest are outlined or links. */
  kind?: 'filled' | 'outlined' | 'link' | undefined;
  /** `stop` for what cannot be undone. */
  tone?: 'stop' | undefined;
  large?: boolean | undefined;
  children?: ReactNode;
}

interface Props extends Look, Omit<ButtonHTMLAttributes<HTMLButtonElement>, 'children' | 'disabled'> {
  /** Makes it a link that looks like a button. */
  href?: string | undefined;
  /** Why it cannot be pressed now, as a sentence; shown beside it. */
  disabledReason?: string | undefined;
  /** While its request is under way. */
  busy?: boolean | undefined;
}

function classes({ kind = 'filled', tone, large = false }: Look): string {
  return ['btn', `btn-${kind}`, tone && `btn-${tone}`, large && 'btn-large'].filter(Boolean).join(' ');
}

/** A button that says what happens. One that cannot be pressed stays reachable and says why. */
export function Button(props: Props) {
  const { kind, tone, large, children, href, disabledReason, busy = false, className, ...rest } = props;
  const reasonId = useId();
  const look = [classes({ kind, tone, large }), className].filter(Boolean).join(' ');

  if (disabledReason !== undefined) {
    return (
      <span className="inline-flex flex-wrap items-center gap-x-3 gap-y-1">
        <button
          {...rest}
          type="button"
          onClick={undefined}
          aria-disabled="true"
          aria-describedby={reasonId}
          className={look}
        >
          {children}
        </button>
        <span id={reasonId} className="quiet">
          {disabledReason}
        </span>
      </span>
    );
  }
  if (href !== undefined) {
    return (
      <a href={href} className={look}>
        {children}
      </a>
    );
  }
  if (busy) {
    return (
      <button
        {...rest}
        type="button"
        onClick={undefined}
        aria-disabled="true"
        aria-busy="true"
        className={look}
      >
        {children}
      </button>
    );
  }
  return (
    <button type="submit" {...rest} className={look}>
      {children}
    </button>
  );
}
