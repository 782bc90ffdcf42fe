import { useState } from 'react';
import { Choice } from '../../components/ui/Choice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { CASE_KINDS } from '../../domain/cases/cases';
import { CASE_KIND_WORDS } from '../../words/domain-cases';
import type { CasesPage, CasesView } from '../../schemas/api/cases';
import { filters } from '../../words/case-board';

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
        label={filters.look}
        options={[
          { value: 'board', label: filters.board },
          { value: 'list', label: filters.list },
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
        {more ? filters.fewerFilters : filters.moreFilters}
      </button>
      <SearchInput
        label={filters.searchByTitleString}
        placeholder={filters.searchCases}
        value={view.q}
        onChange={(q) => onChange({ q }, 'typed')}
      />
      <Segmented
        label={filters.whose}
        options={[
          { value: 'all', label: filters.everybodys },
          { value: 'mine', label: filters.mine },
          { value: 'unassigned', label: filters.nobodys },
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
        {filters.overdue}
      </label>
      <Choice
        inline
        label={filters.site}
        value={view.site}
        className={`max-w-full [&_select]:max-w-[190px] ${hidden}`}
        options={[
          { value: 'all', label: filters.allSites },
          ...page.sites.map((s) => ({ value: s.id, label: s.name })),
        ]}
        onChange={(site) => onChange({ site })}
      />
      <Choice
        inline
        label={filters.kind}
        value={view.kind}
        className={`max-w-full [&_select]:max-w-[190px] ${hidden}`}
        options={[
          { value: 'all', label: filters.allKinds },
          ...CASE_KINDS.map((k) => ({ value: k, label: CASE_KIND_WORDS[k] })),
        ]}
        onChange={(kind) => onChange({ kind: CASE_KINDS.find((k) => k === kind) ?? 'all' })}
      />
      <Choice
        inline
        label={filters.closed}
        value={view.show}
        className={hidden}
        options={[
          { value: 'current', label: filters.of30Days },
          { value: 'open', label: filters.none },
          { value: 'all', label: filters.all },
        ]}
        onChange={(show) => onChange({ show: show === 'open' || show === 'all' ? show : 'current' })}
      />
    </form>
  );
}
