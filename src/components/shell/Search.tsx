import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react';
import { api, ApiError } from '../../lib/api';
import type { SearchReply } from '../../schemas/api/search';
import { paths } from '../../schemas/paths';
import { shellSearch } from '../../words/shell';

type Result = SearchReply['results'][number];
const KIND: Record<Result['kind'], string> = {
  site: shellSearch.site,
  string: shellSearch.string,
  unit: shellSearch.unit,
};

const NOTHING = { q: '', results: [], note: '' };

/** Asks as the person types, a little behind; an answer to an older question is dropped. */
function useFound(q: string): { results: Result[]; note: string } {
  const [found, setFound] = useState<{ q: string; results: Result[]; note: string }>(NOTHING);
  useEffect(() => {
    if (q.length < 2) return;
    const stop = new AbortController();
    const timer = setTimeout(() => {
      api<SearchReply>(paths.api.search(), { query: { q }, signal: stop.signal })
        .then(({ results }) =>
          setFound({
            q,
            results,
            note: results.length
              ? shellSearch.resultsFound(results.length)
              : shellSearch.nothingHereIsCalled(q),
          }),
        )
        .catch((error: unknown) => {
          if (error instanceof ApiError) setFound({ q, results: [], note: error.message });
        });
    }, 150);
    return () => {
      clearTimeout(timer);
      stop.abort();
    };
  }, [q]);
  // while the next answer is on its way the last one stands
  return q.length < 2 ? NOTHING : found;
}

/** Finds a site, string or serial from anywhere. Without scripts the form filters the fleet. */
export function Search() {
  const [typed, setTyped] = useState('');
  const [chosen, setChosen] = useState(-1);
  const [open, setOpen] = useState(false);
  const input = useRef<HTMLInputElement>(null);
  const listId = useId();
  const { results, note } = useFound(typed.trim());

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
        aria-controls={listId}
        aria-autocomplete="list"
        aria-activedescendant={showing && chosen >= 0 ? `${listId}-${chosen}` : undefined}
        value={typed}
        onChange={(event) => {
          setTyped(event.target.value);
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
      <div
        hidden={!showing}
        className="absolute right-0 z-40 mt-1 w-[min(420px,calc(100vw-32px))] border border-t-2 border-rule border-t-ink bg-sheet"
      >
        <ul id={listId} role="listbox" aria-label={shellSearch.found}>
          {results.map((result, i) => (
            <li
              key={`${result.kind} ${result.href} ${result.label}`}
              id={`${listId}-${i}`}
              role="option"
              aria-selected={i === chosen}
              className={`border-b border-rule-faint ${i === chosen ? 'bg-petrol-wash' : ''}`}
            >
              <a
                href={result.href}
                tabIndex={-1}
                className="flex min-h-[44px] items-center gap-3 px-3 py-1.5 hover:bg-petrol-wash"
              >
                <span className="w-10 shrink-0 text-xs text-ink-2">{KIND[result.kind]}</span>
                <span className="min-w-0">
                  <span className="font-semibold">{result.label}</span>{' '}
                  <span className="text-sm text-ink-2">{result.where}</span>
                </span>
              </a>
            </li>
          ))}
        </ul>
        <p role="status" className="px-3 py-2 text-sm text-ink-2">
          {note}
        </p>
      </div>
    </form>
  );
}
