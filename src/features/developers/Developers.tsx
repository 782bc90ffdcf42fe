import { useState } from 'react';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { useViewInUrl } from '../../lib/view-in-url';
import type { OperationShown } from '../../schemas/api/developers';
import { groupsOf, operationsFound } from './search';
import { OperationSheet } from './OperationSheet';
import { developers } from '../../words/developers';

type View = Pick<Props, 'q'>;
const DEFAULTS: View = { q: '' };

interface Props {
  operations: OperationShown[];
  /** Searched for at first. */
  q: string;
}

/** Every operation of the API, found by any of its words. */
export function Developers({ operations, q }: Props) {
  const [first] = useState<View>({ q });
  const [view, setView] = useViewInUrl(first, DEFAULTS);
  const [said, setSaid] = useState('');
  const shown = operationsFound(operations, view.q);
  const groups = groupsOf(shown);
  return (
    <>
      <form
        role="search"
        aria-label={developers.operations}
        className="no-print mb-4 flex flex-wrap items-center gap-x-4 gap-y-2"
        onSubmit={(event) => event.preventDefault()}
      >
        <SearchInput
          label={developers.findLabel}
          value={view.q}
          onChange={(typed) => setView({ q: typed }, 'typed')}
          className="sm:w-[360px]"
        />
        <span className="text-sm text-ink-2" role="status">
          {view.q && developers.ofOperations(shown.length, operations.length)}
        </span>
        <span className="sr-only" role="status">
          {said}
        </span>
      </form>
      {shown.length === 0 && (
        <Notice kind="empty" title={developers.nothingFound(view.q)}>
          {developers.searchHint}
        </Notice>
      )}
      <div className="lg:grid lg:grid-cols-[220px_minmax(0,1fr)] lg:gap-8">
        <nav aria-label={developers.operations} className="hidden lg:block">
          <ul className="sticky top-4 max-h-[calc(100vh-32px)] overflow-y-auto pb-4">
            {groups.map(({ group, operations: of }) => (
              <li key={group} className="mb-3">
                <p className="text-sm font-medium text-ink-2">{group}</p>
                <ul>
                  {of.map((o) => (
                    <li key={o.id}>
                      <a href={`#${o.id}`} className="link flex min-h-[28px] items-center gap-1.5 text-sm">
                        {o.path}
                      </a>
                    </li>
                  ))}
                </ul>
              </li>
            ))}
          </ul>
        </nav>
        <div className="space-y-8">
          {groups.map(({ group, operations: of }) => (
            <section key={group} aria-label={group}>
              <h2 className="mb-2 text-xl">{group}</h2>
              <div className="space-y-4">
                {of.map((o) => (
                  <OperationSheet
                    key={o.id}
                    operation={o}
                    onCopied={() => setSaid(developers.exampleCopied(o.path))}
                  />
                ))}
              </div>
            </section>
          ))}
        </div>
      </div>
    </>
  );
}
