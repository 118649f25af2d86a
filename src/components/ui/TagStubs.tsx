import type { ReactNode } from 'react';
import type { Verdict } from '~/domain/bench/types';
import { Button } from './Button';
import { Tag } from './Tag';
import { VerdictMark } from './VerdictMark';

interface Happening {
  /** Shape and colour before the title; a rework is `too_close`'s half ring. */
  mark?: Verdict | undefined;
  title?: string | undefined;
  text?: string | undefined;
  /** When and by whom, in the monospaced face. */
  meta?: string | undefined;
}

interface Stub {
  key: string;
  label: string;
  state: 'torn' | 'present' | 'waiting';
  /** Under the label: "torn off 2 March", "waits for the certificate". */
  note?: string | undefined;
  /** A link, or, with `postKey`, a form that is posted once. */
  action?: { label: string; href: string; postKey?: string | undefined } | undefined;
  /** What happened at this stub, oldest first. */
  happenings: readonly Happening[];
}

interface Props {
  serial: string;
  line?: string | undefined;
  quiet?: readonly string[] | undefined;
  stubs: readonly Stub[];
  /** Level of the serial number's heading; 1 unless the page has another. */
  level?: 1 | 2 | undefined;
  /** Beneath the tag itself: the parts in it. */
  children?: ReactNode;
}

/** A unit's tag with its row of stubs, and beneath each stub what happened there. */
export function TagStubs({ serial, line, quiet, stubs, level = 1, children }: Props) {
  const StubTitle = level === 1 ? 'h2' : 'h3';
  return (
    <div className="stub-row">
      <div className="stub-first">
        <Tag size="l" level={level} serial={serial} line={line} quiet={quiet} />
        {children !== undefined && <div className="px-4 pt-3 pb-4 xl:pl-14">{children}</div>}
      </div>
      <ol className="stub-list" aria-label="Work on this unit">
        {stubs.map((stub) => (
          <li
            key={stub.key}
            className={`stub stub-${stub.state}`}
            aria-current={stub.state === 'present' ? 'step' : undefined}
          >
            <div className="stub-card">
              <StubTitle className="leading-tight">{stub.label}</StubTitle>
              {stub.note !== undefined && (
                <p className={stub.state === 'present' ? 'mt-1 text-[0.9375rem] leading-snug' : 'quiet'}>
                  {stub.note}
                </p>
              )}
              {stub.action !== undefined && (
                <div className="mt-2.5">
                  {stub.action.postKey === undefined ? (
                    <Button href={stub.action.href}>{stub.action.label}</Button>
                  ) : (
                    <form action={stub.action.href} method="post">
                      <input type="hidden" name="_key" value={stub.action.postKey} />
                      <Button>{stub.action.label}</Button>
                    </form>
                  )}
                </div>
              )}
            </div>
            <Beneath happenings={stub.happenings} />
          </li>
        ))}
      </ol>
    </div>
  );
}

function Beneath({ happenings }: { happenings: readonly Happening[] }) {
  if (happenings.length === 0) return <div className="stub-beneath hidden xl:block" />;
  return (
    <ul className="stub-beneath grid content-start gap-3 text-[0.9375rem] leading-snug">
      {happenings.map((happening, index) => (
        <li key={index}>
          {happening.mark !== undefined && <VerdictMark verdict={happening.mark} word={happening.title} />}
          {happening.mark === undefined && happening.title !== undefined && (
            <p className="font-semibold">{happening.title}</p>
          )}
          {happening.text !== undefined && <p>{happening.text}</p>}
          {happening.meta !== undefined && (
            <p className="font-mono text-quiet leading-snug text-ink-2">{unbroken(happening.meta)}</p>
          )}
        </li>
      ))}
    </ul>
  );
}

/** Breaks a line only between its pieces, never inside a time or a name. */
function unbroken(meta: string): string {
  return meta
    .split(' · ')
    .map((piece) => piece.replaceAll(' ', '\u00a0'))
    .join(' · ');
}
