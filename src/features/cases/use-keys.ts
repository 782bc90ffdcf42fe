import { useEffect, useRef } from 'react';

/** Single keys of a page: not while somebody types, not with a modifier, not behind an open dialog. */
export function useKeys(keys: Readonly<Record<string, () => void>>): void {
  const current = useRef(keys);
  useEffect(() => {
    current.current = keys;
  });
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      const target = event.target;
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      if (target instanceof HTMLElement && target.matches('input, textarea, select, [contenteditable]'))
        return;
      if (document.querySelector('dialog[open]')) return;
      const act = Object.hasOwn(current.current, event.key) ? current.current[event.key] : undefined;
      if (!act) return;
      event.preventDefault();
      act();
    };
    document.addEventListener('keydown', onKey);
    return () => document.removeEventListener('keydown', onKey);
  }, []);
}
