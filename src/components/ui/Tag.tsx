import type { ReactNode } from 'react';

interface Props {
  size?: 's' | 'm' | 'l' | undefined;
  /** Serial number, in the large monospaced face. */
  serial?: string | undefined;
  /** In place of a serial number, on a tag that has none yet (a place in a batch). */
  heading?: string | undefined;
  /** Quiet line above the serial number. */
  above?: string | undefined;
  /** What the unit is: model and options. */
  line?: string | undefined;
  /** Quiet lines beneath: batch, order, call sign. */
  quiet?: readonly string[] | undefined;
  /** Makes the serial number a link to the unit. */
  href?: string | undefined;
  /** Level of the serial number's heading; without it the tag is no heading. */
  level?: 1 | 2 | 3 | undefined;
  /** Stands on the right: a price and its button, for whom it was built. */
  aside?: ReactNode;
  /** More lines beneath the quiet ones. */
  children?: ReactNode;
}

const SERIAL = {
  s: 'text-lg leading-tight',
  m: 'text-2xl leading-tight',
  l: 'text-3xl leading-tight lg:text-[2.125rem]',
} as const;

const HEADING = {
  s: 'text-base leading-tight',
  m: 'text-xl leading-tight',
  l: 'text-2xl leading-tight',
} as const;

/** The tied-on tag of a unit. The only manila in the application. */
export function Tag(props: Props) {
  const { size = 'm', serial, heading, above, line, quiet = [], href, level, aside, children } = props;
  const Title = level === undefined ? 'p' : (`h${level}` as const);
  const name = serial ?? heading;
  const face =
    serial === undefined ? `font-head ${HEADING[size]}` : `font-mono tracking-tight ${SERIAL[size]}`;
  return (
    <div className={`tag tag-${size} flex-wrap lg:flex-nowrap`}>
      <span className="eyelet" aria-hidden="true" />
      <div className="min-w-0 flex-1">
        {above !== undefined && <p className="quiet">{above}</p>}
        {name !== undefined && (
          <Title className={`font-bold wrap-anywhere ${face}`}>
            {href === undefined ? (
              name
            ) : (
              <a href={href} className="no-underline hover:underline">
                {name}
              </a>
            )}
          </Title>
        )}
        {line !== undefined && <p className={size === 's' ? 'text-sm' : 'leading-snug'}>{line}</p>}
        {quiet.map((text) => (
          <p key={text} className="quiet">
            {text}
          </p>
        ))}
        {children}
      </div>
      {aside !== undefined && <div className="basis-full lg:basis-auto">{aside}</div>}
    </div>
  );
}
