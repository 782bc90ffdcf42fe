import { Button } from '../ui/Button';

interface Props {
  words: string;
  /** 0 to 1; null: not known. */
  share: number | null;
  onStop?: (() => void) | undefined;
  /** What stopping leaves. */
  stopWords: string;
}

/** How far long work is, for eyes and for screen readers. */
export function ProgressLine({ words, share, onStop, stopWords }: Props) {
  return (
    <div
      className="flex flex-wrap items-center gap-x-4 gap-y-2 border border-rule bg-sheet p-3"
      role="status"
    >
      <span className="min-w-[220px] text-[15px]">{words} …</span>
      <progress
        aria-label={words}
        className="h-2 min-w-[120px] flex-1 accent-petrol"
        {...(share === null ? {} : { value: share, max: 1 })}
      />
      {onStop && <Button onClick={onStop}>{stopWords}</Button>}
    </div>
  );
}
