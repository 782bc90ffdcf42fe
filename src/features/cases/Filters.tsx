import { useState } from 'react';
import { Choice } from '../../components/ui/Choice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { CASE_KINDS, CASE_KIND_WORDS } from '../../domain/cases/cases';
import type { CasesPage, CasesView } from '../../schemas/api/cases';

interface Props {
  page: CasesPage;
  view: CasesView;
  onChange: (some: Partial<CasesView>, how?: 'typed' | 'chosen') => void;
}

/** Board or list, search, and which cases; on a phone what is seldom chosen waits behind a button. */
export function Filters({ page, view, onChange }: Props) {
  const [more, setMore] = useState(false);
  const hidden = more ? '' : 'max-sm:hidden';
  return (
    <form
      className="no-print mb-3 flex flex-wrap items-center gap-x-4 gap-y-2"
      onSubmit={(event) => event.preventDefault()}
    >
      <Segmented
        label="Look"
        options={[
          { value: 'board', label: 'Board' },
          { value: 'list', label: 'List' },
        ]}
        value={view.look}
        onChange={(look) => onChange({ look })}
      />
      <button
        type="button"
        aria-expanded={more}
        className="target ml-auto text-sm text-petrol underline underline-offset-[3px] sm:hidden"
        onClick={() => setMore(!more)}
      >
        {more ? 'Fewer filters' : 'More filters'}
      </button>
      <SearchInput
        label="Search by title, string, person or number"
        placeholder="Search cases"
        value={view.q}
        onChange={(q) => onChange({ q }, 'typed')}
      />
      <Segmented
        label="Whose"
        options={[
          { value: 'all', label: 'Everybody’s' },
          { value: 'mine', label: 'Mine' },
          { value: 'unassigned', label: 'Nobody’s' },
        ]}
        value={view.who}
        onChange={(who) => onChange({ who })}
      />
      <label className="target inline-flex items-center gap-2 text-sm">
        <input
          type="checkbox"
          checked={view.due === 'overdue'}
          onChange={(event) => onChange({ due: event.target.checked ? 'overdue' : 'all' })}
          className="h-5 w-5 accent-[var(--petrol)]"
        />
        Overdue
      </label>
      <Choice
        inline
        label="Site"
        value={view.site}
        className={`max-w-full [&_select]:max-w-[190px] ${hidden}`}
        options={[
          { value: 'all', label: 'All sites' },
          ...page.sites.map((s) => ({ value: s.id, label: s.name })),
        ]}
        onChange={(site) => onChange({ site })}
      />
      <Choice
        inline
        label="Kind"
        value={view.kind}
        className={`max-w-full [&_select]:max-w-[190px] ${hidden}`}
        options={[
          { value: 'all', label: 'All kinds' },
          ...CASE_KINDS.map((k) => ({ value: k, label: CASE_KIND_WORDS[k] })),
        ]}
        onChange={(kind) => onChange({ kind: CASE_KINDS.find((k) => k === kind) ?? 'all' })}
      />
      <Choice
        inline
        label="Closed"
        value={view.show}
        className={hidden}
        options={[
          { value: 'current', label: 'of 30 days' },
          { value: 'open', label: 'none' },
          { value: 'all', label: 'all' },
        ]}
        onChange={(show) => onChange({ show: show === 'open' || show === 'all' ? show : 'current' })}
      />
    </form>
  );
}
