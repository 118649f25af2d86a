import type { ReactNode } from 'react';

const TONES = {
  info: { look: 'border-slate bg-slate-wash', word: 'Note', tone: 'text-slate' },
  ok: { look: 'border-patina bg-patina-wash', word: 'Done', tone: 'text-patina' },
  warn: { look: 'border-lamp bg-lamp-wash', word: 'Take care', tone: 'text-lamp' },
  stop: { look: 'border-stop bg-stop-wash', word: 'Stopped', tone: 'text-stop' },
} as const;

interface Props {
  tone?: keyof typeof TONES | undefined;
  /** A few words; without it the tone's own word stands there, so that colour is never alone. */
  title?: string | undefined;
  children?: ReactNode;
}

/** Says that something happened, or that something stands in the way. */
export function Notice({ tone = 'info', title, children }: Props) {
  const { look, word, tone: text } = TONES[tone];
  const role = tone === 'stop' ? 'alert' : tone === 'ok' ? 'status' : 'note';
  return (
    <div role={role} className={`border-l-4 px-4 py-2.5 ${look}`}>
      <p className={`font-semibold ${text}`}>{title ?? word}</p>
      {children !== undefined && <div className="max-w-prose leading-snug">{children}</div>}
    </div>
  );
}
