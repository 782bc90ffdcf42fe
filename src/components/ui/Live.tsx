import { live } from '../../words/ui';

interface Props {
  /** Since when nothing has come, ISO 8601; null while the connection stands. */
  lostSince: string | null;
  timeZone: string;
}

/** Says when what is shown has stopped being live. Quiet while it is. */
export function LiveMark({ lostSince, timeZone }: Props) {
  return (
    <span role="status" className="text-sm">
      {lostSince ? (
        <span className="inline-flex items-center gap-1.5 rounded bg-rust-wash px-2 leading-[22px] text-rust-ink">
          <span aria-hidden="true">◔</span>
          {live.notLiveSince(lostSince, timeZone)}
        </span>
      ) : null}
    </span>
  );
}
