import { useCallback, useEffect, useState } from 'react';

/** The address of this page with what differs from the defaults. */
export function addressOf(
  path: string,
  view: Record<string, string>,
  defaults: Record<string, string>,
): string {
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(view)) if (value !== defaults[key]) search.set(key, value);
  const text = search.toString();
  return text ? `${path}?${text}` : path;
}

/**
 * What a list shows, kept in the address so that it can be sent, bookmarked and gone back from. The server reads
 * the address first and hands the same view in. Typing replaces the entry in the history, a choice adds one.
 */
export function useViewInUrl<V extends Record<string, string>>(
  initial: V,
  defaults: V,
): [V, (some: Partial<V>, how?: 'typed' | 'chosen') => void] {
  const [view, setView] = useState(initial);
  useEffect(() => {
    window.history.replaceState({ view: initial }, '');
    const onPop = (event: PopStateEvent) => {
      const state: unknown = event.state;
      if (typeof state === 'object' && state !== null && 'view' in state) setView(state.view as V);
    };
    window.addEventListener('popstate', onPop);
    return () => window.removeEventListener('popstate', onPop);
  }, [initial]);
  const change = useCallback(
    (some: Partial<V>, how: 'typed' | 'chosen' = 'chosen') => {
      const next = { ...view, ...some };
      const address = addressOf(window.location.pathname, next, defaults);
      window.history[how === 'typed' ? 'replaceState' : 'pushState']({ view: next }, '', address);
      setView(next);
    },
    [view, defaults],
  );
  return [view, change];
}
