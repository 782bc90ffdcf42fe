import { Suspense, useEffect, useId, useRef, useState, type KeyboardEvent } from 'react';
import { late } from '../../lib/late';
import { paths } from '../../schemas/paths';
import { shellSearch } from '../../words/shell';
import type { Found } from './SearchFound';

const SearchFound = late(async () => (await import('./SearchFound')).SearchFound);

/** Finds a site, string or serial from anywhere. Without scripts the form filters the fleet. */
export function Search() {
  const [typed, setTyped] = useState('');
  const [chosen, setChosen] = useState(-1);
  const [open, setOpen] = useState(false);
  const input = useRef<HTMLInputElement>(null);
  const listId = useId();
  const [{ results, note }, setFound] = useState<Found>({ results: [], note: '' });
  const [asked, setAsked] = useState(false);

  useEffect(() => {
    const onSlash = (event: globalThis.KeyboardEvent) => {
      const target = event.target;
      if (event.key !== '/' || event.ctrlKey || event.metaKey) return;
      if (target instanceof HTMLElement && target.matches('input, textarea, select, [contenteditable]'))
        return;
      event.preventDefault();
      input.current?.focus();
      input.current?.select();
    };
    document.addEventListener('keydown', onSlash);
    return () => document.removeEventListener('keydown', onSlash);
  }, []);

  const onKeyDown = (event: KeyboardEvent<HTMLInputElement>) => {
    if (event.key === 'Escape') {
      setOpen(false);
      input.current?.blur();
    } else if ((event.key === 'ArrowDown' || event.key === 'ArrowUp') && results.length > 0) {
      event.preventDefault();
      const step = event.key === 'ArrowDown' ? 1 : -1;
      setChosen((at) => (at + step + results.length) % results.length);
    } else if (event.key === 'Enter') {
      const result = results[Math.max(0, chosen)];
      if (!result) return;
      event.preventDefault();
      window.location.assign(result.href);
    }
  };
  const showing = open && typed.trim().length >= 2 && note !== '';
  return (
    <form
      action={paths.fleet()}
      role="search"
      aria-label={shellSearch.everything}
      className="relative"
      onFocus={() => setOpen(true)}
      onBlur={(event) => {
        if (!event.currentTarget.contains(event.relatedTarget)) setOpen(false);
      }}
    >
      <input
        ref={input}
        type="search"
        name="q"
        autoComplete="off"
        aria-label={shellSearch.findASiteString}
        placeholder={shellSearch.findASiteString}
        role="combobox"
        aria-expanded={showing}
        aria-controls={asked ? listId : undefined}
        aria-autocomplete="list"
        aria-activedescendant={showing && chosen >= 0 ? `${listId}-${chosen}` : undefined}
        value={typed}
        onChange={(event) => {
          setTyped(event.target.value);
          setAsked(true);
          setChosen(-1);
          setOpen(true);
        }}
        onKeyDown={onKeyDown}
        className="target w-[108px] text-ellipsis rounded border border-rule bg-sheet py-1 pl-2.5 pr-2 sm:pr-8 text-[15px] text-ink placeholder:text-ink-3 sm:w-[200px] lg:w-[300px] [&::-webkit-search-cancel-button]:hidden"
      />
      <kbd
        aria-hidden="true"
        className="pointer-events-none absolute right-2 top-1/2 hidden sm:block -translate-y-1/2 rounded border border-rule px-1.5 font-sans text-xs text-ink-3"
      >
        /
      </kbd>
      {asked && (
        <Suspense>
          <SearchFound q={typed.trim()} open={showing} listId={listId} chosen={chosen} onFound={setFound} />
        </Suspense>
      )}
    </form>
  );
}
