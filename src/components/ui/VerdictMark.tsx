import type { Verdict } from '~/domain/bench/types';

const WORDS: Record<Verdict, string> = {
  pass: 'Pass',
  too_close: 'Too close to call',
  fail: 'Fail',
  not_run: 'Not run',
};

const TONES: Record<Verdict, string> = {
  pass: 'text-patina',
  too_close: 'text-lamp',
  fail: 'text-stop',
  not_run: 'text-ink-2',
};

const SIZES = { s: 12, m: 15, l: 20 } as const;

interface Props {
  verdict: Verdict;
  /** Stands in place of the verdict's own word, as in "Pass, 3.9 dB in hand". */
  word?: string | undefined;
  /** Shows the shape alone, where the column's heading or the row says the rest; the word is still read out. */
  bare?: boolean | undefined;
  size?: keyof typeof SIZES | undefined;
}

/** A verdict as shape and word: filled disc, half-filled ring, cross, empty ring. */
export function VerdictMark({ verdict, word = WORDS[verdict], bare = false, size = 'm' }: Props) {
  const px = SIZES[size];
  return (
    <span className={`inline-flex items-baseline gap-1.5 font-semibold ${TONES[verdict]}`}>
      <svg
        viewBox="0 0 16 16"
        width={px}
        height={px}
        className="shrink-0 translate-y-[0.125em]"
        aria-hidden="true"
        data-verdict={verdict}
      >
        <Shape verdict={verdict} />
      </svg>
      <span className={bare ? 'sr-only' : undefined}>{word}</span>
    </span>
  );
}

function Shape({ verdict }: { verdict: Verdict }) {
  switch (verdict) {
    case 'pass':
      return <circle cx="8" cy="8" r="7.5" fill="currentColor" />;
    case 'too_close':
      return (
        <>
          <circle cx="8" cy="8" r="6.5" fill="none" stroke="currentColor" strokeWidth="2" />
          <path d="M8 2a6 6 0 0 1 0 12z" fill="currentColor" />
        </>
      );
    case 'fail':
      return <path d="M2.5 2.5l11 11m0-11l-11 11" stroke="currentColor" strokeWidth="4" fill="none" />;
    case 'not_run':
      return <circle cx="8" cy="8" r="6.5" fill="none" stroke="currentColor" strokeWidth="2" />;
  }
}
