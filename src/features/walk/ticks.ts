import { useCallback, useSyncExternalStore } from 'react';
import type { StopKind } from './stops';

/** Stops that somebody has ticked, kept in this browser. */
export interface Tick {
  key: string;
  /** When, ISO 8601. */
  at: string;
  kind: StopKind;
}

const nameOf = (site: string): string => `wakeline.walk.${site}`;
const EVENT = 'wakeline-walk';
const NONE: readonly Tick[] = [];
let known: { raw: string | null; site: string; ticks: readonly Tick[] } | null = null;

/** What the browser kept; what cannot be read is nothing. */
export function parseTicks(raw: string | null): readonly Tick[] {
  if (raw === null) return NONE;
  try {
    const value: unknown = JSON.parse(raw);
    return Array.isArray(value)
      ? value.filter(
          (t: unknown): t is Tick =>
            typeof t === 'object' &&
            t !== null &&
            'key' in t &&
            typeof t.key === 'string' &&
            'at' in t &&
            typeof t.at === 'string' &&
            'kind' in t,
        )
      : NONE;
  } catch {
    return NONE; // not ours
  }
}

function read(site: string): readonly Tick[] {
  const raw = window.localStorage.getItem(nameOf(site));
  if (known?.raw !== raw || known.site !== site) known = { raw, site, ticks: parseTicks(raw) };
  return known.ticks;
}

function subscribe(changed: () => void): () => void {
  window.addEventListener('storage', changed);
  window.addEventListener(EVENT, changed);
  return () => {
    window.removeEventListener('storage', changed);
    window.removeEventListener(EVENT, changed);
  };
}

/** The ticks of a site, and a way to set or take one. */
export function useTicks(site: string): [readonly Tick[], (tick: Tick, on: boolean) => void] {
  const ticks = useSyncExternalStore(
    subscribe,
    () => read(site),
    () => NONE,
  );
  const set = useCallback(
    (tick: Tick, on: boolean) => {
      const others = read(site).filter((t) => t.key !== tick.key);
      window.localStorage.setItem(nameOf(site), JSON.stringify(on ? [...others, tick] : others));
      window.dispatchEvent(new Event(EVENT));
    },
    [site],
  );
  return [ticks, set];
}
