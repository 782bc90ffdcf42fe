import { useEffect, useState } from 'react';

/** The server's time in whole steps, ticking as each begins: screens that show the same site change together. */
export function useSteps(serverNow: string, everyMs: number): Date {
  const [now, setNow] = useState(() => new Date(serverNow));
  useEffect(() => {
    const shift = new Date(serverNow).getTime() - performance.now();
    let timer: ReturnType<typeof setTimeout>;
    const wait = () => {
      const at = shift + performance.now();
      timer = setTimeout(tick, everyMs - (at % everyMs));
      return at;
    };
    const tick = () => setNow(new Date(wait()));
    wait();
    return () => clearTimeout(timer);
  }, [serverNow, everyMs]);
  return now;
}
