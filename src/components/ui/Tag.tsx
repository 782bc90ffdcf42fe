import type { ReactNode } from 'react';

export type Tone = 'petrol' | 'plum' | 'rust' | 'crimson' | 'slate' | 'outline' | 'plain';
const TONE: Record<Tone, string> = {
  petrol: 'bg-petrol-wash text-petrol',
  plum: 'bg-plum-wash text-plum',
  rust: 'bg-rust-wash text-rust-ink',
  crimson: 'bg-crimson text-on-crimson',
  slate: 'bg-slate-wash text-ink-2',
  outline: 'border border-dashed border-ink-3 text-ink-2',
  plain: 'bg-film text-ink-2',
};

interface Props {
  tone?: Tone;
  /** A sign of one character or a small drawing; the word beside it says the same. */
  shape?: ReactNode;
  title?: string;
  children: ReactNode;
}

/** A word with a shape and a colour, in that order of weight. */
export function Tag({ tone = 'plain', shape, title, children }: Props) {
  return (
    <span
      title={title}
      className={`inline-flex min-h-[22px] items-center gap-1 whitespace-nowrap rounded px-2 text-sm font-medium leading-5 ${TONE[tone]}`}
    >
      {shape && (
        <span aria-hidden="true" className="inline-flex text-[0.85em] leading-none">
          {shape}
        </span>
      )}
      {children}
    </span>
  );
}
