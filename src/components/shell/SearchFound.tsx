import { useEffect, useState } from 'react';
import { api, ApiError } from '../../lib/api';
import type { SearchReply } from '../../schemas/api/search';
import { paths } from '../../schemas/paths';
import { shellSearch } from '../../words/shell';

export type Result = SearchReply['results'][number];
export interface Found {
  results: Result[];
  note: string;
}
const KIND: Record<Result['kind'], string> = {
  site: shellSearch.site,
  string: shellSearch.string,
  unit: shellSearch.unit,
};

const NOTHING = { results: [], note: '' };

/** Asks as the person types, a little behind; an answer to an older question is dropped. */
function useFound(q: string): Found {
  const [found, setFound] = useState<Found>(NOTHING);
  useEffect(() => {
    if (q.length < 2) return;
    const stop = new AbortController();
    const timer = setTimeout(() => {
      api<SearchReply>(paths.api.search(), { query: { q }, signal: stop.signal })
        .then(({ results }) =>
          setFound({
            results,
            note: results.length
              ? shellSearch.resultsFound(results.length)
              : shellSearch.nothingHereIsCalled(q),
          }),
        )
        .catch((error: unknown) => {
          if (error instanceof ApiError) setFound({ results: [], note: error.message });
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

interface Props {
  q: string;
  open: boolean;
  listId: string;
  /** The place of the one that Enter opens; -1: none was chosen. */
  chosen: number;
  onFound: (found: Found) => void;
}

/** What is found, below the field. */
export function SearchFound({ q, open, listId, chosen, onFound }: Props) {
  const found = useFound(q);
  useEffect(() => onFound(found), [found, onFound]);
  return (
    <div
      hidden={!open || found.note === ''}
      className="fixed inset-x-4 z-40 mt-1 border border-t-2 border-rule border-t-ink bg-sheet sm:absolute sm:left-auto sm:right-0 sm:w-[420px]"
    >
      <ul id={listId} role="listbox" aria-label={shellSearch.found}>
        {found.results.map((result, i) => (
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
        {found.note}
      </p>
    </div>
  );
}
