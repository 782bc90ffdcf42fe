import { ago, fullTime } from '../../drawings/times';
import { statusSheets } from '../../words/status';

/** How long ago, with the time itself at hand. */
export function When({ at, now, timeZone }: { at: string | null; now: string; timeZone: string }) {
  if (!at) return <>{statusSheets.never}</>;
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {ago(at, now)}
    </time>
  );
}
