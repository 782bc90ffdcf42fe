import { clockOrDate, clockSeconds, fullTime, localDay } from '../../drawings/times';
import { statusSheets } from '../../words/status';

interface Props {
  at: string | null;
  /** When the page was read. */
  now: string;
  timeZone: string;
}

/** The instant itself, to the second today: it stays true however long the page stands open. */
export function When({ at, now, timeZone }: Props) {
  if (!at) return <>{statusSheets.never}</>;
  const today = localDay(at, timeZone) === localDay(now, timeZone);
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {today ? clockSeconds(at, timeZone) : clockOrDate(at, now, timeZone)}
    </time>
  );
}
