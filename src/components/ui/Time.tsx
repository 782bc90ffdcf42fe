import { useEffect, useState } from 'react';
import { ago, clockOrDate, fullTime, zoneName } from '../../drawings/times';

/**
 * The time, ticking. Starts at the server's clock, so that the first paint and the island agree; then follows
 * the browser's clock, corrected by the difference seen at the start.
 */
export function useNow(serverNow: string, everyMs = 10_000): Date {
  const [now, setNow] = useState(() => new Date(serverNow));
  useEffect(() => {
    const start = new Date(serverNow).getTime();
    const from = performance.now();
    const tick = () => setNow(new Date(start + performance.now() - from));
    const timer = setInterval(tick, everyMs);
    return () => clearInterval(timer);
  }, [serverNow, everyMs]);
  return now;
}

interface Props {
  at: string;
  /** The server's clock when the page was made, ISO 8601. */
  now: string;
  timeZone: string;
}

/** "41 min ago", the absolute time in its title. */
export function RelativeTime({ at, now, timeZone }: Props) {
  const current = useNow(now);
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {ago(at, current)}
    </time>
  );
}

/** "14:02" today, "3 Nov, 14:02" before; the zone named when asked for. */
export function SiteTime({ at, now, timeZone, zone = false }: Props & { zone?: boolean }) {
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {clockOrDate(at, now, timeZone)}
      {zone && ` ${zoneName(at, timeZone)}`}
    </time>
  );
}
