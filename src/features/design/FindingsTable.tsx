import type { ReactNode } from 'react';
import { Table, type Column } from '../../components/ui/Table';
import { Tag, type Tone } from '../../components/ui/Tag';
import { number, quantity } from '../../drawings/numbers';
import type { DesignView, SiteDesignItem } from '../../schemas/api/design';
import { CHECK_WORDS, OUTCOME_WORDS, stringsInShort } from '../../words/design-sentences';
import { findingsTable } from '../../words/design';

interface Props {
  rows: readonly SiteDesignItem[];
  view: DesignView;
  onChange: (some: Partial<DesignView>) => void;
  empty: ReactNode;
}

const TONE: Record<SiteDesignItem['outcome'], { tone: Tone; shape: string }> = {
  exceeded: { tone: 'rust', shape: '×' },
  cannot_tell: { tone: 'outline', shape: '?' },
  within: { tone: 'petrol', shape: '✓' },
  not_required: { tone: 'plain', shape: '–' },
};

function figure(value: number | null, unit: SiteDesignItem['unit']): string {
  const digits = value === null || Number.isInteger(value) ? 0 : Math.abs(value) < 100 ? 1 : 0;
  return unit === '' ? number(value, digits) : quantity(value, unit, digits);
}

const COLUMNS: Column<SiteDesignItem>[] = [
  {
    key: 'gravity',
    label: findingsTable.outcome,
    sortable: true,
    from: 'md',
    className: '!align-top',
    cell: (f) => <Outcome finding={f} />,
  },
  {
    key: 'check',
    label: findingsTable.check,
    sortable: true,
    className: '!align-top',
    cell: (f) => (
      <>
        <div className="mb-1 md:hidden">
          <Outcome finding={f} />
        </div>
        <p className="font-medium">{CHECK_WORDS[f.check]}</p>
        <p className="text-sm text-ink-2">{stringsInShort(f.strings)}</p>
        {f.limit !== null && (
          <p className="sm:hidden">
            {figure(f.value, f.unit)}{' '}
            <span className="text-ink-2">{findingsTable.againstLimit(figure(f.limit, f.unit))}</span>
          </p>
        )}
        <div className="mt-1 lg:hidden">
          <Found finding={f} />
        </div>
      </>
    ),
  },
  {
    key: 'strings',
    label: findingsTable.strings,
    numeric: true,
    sortable: true,
    from: 'lg',
    className: '!align-top',
    cell: (f) => number(f.strings.length),
  },
  {
    key: 'value',
    label: findingsTable.figure,
    numeric: true,
    from: 'sm',
    className: '!align-top',
    cell: (f) => figure(f.value, f.unit),
  },
  {
    key: 'limit',
    label: findingsTable.limit,
    numeric: true,
    from: 'sm',
    className: '!align-top',
    cell: (f) => figure(f.limit, f.unit),
  },
  {
    key: 'found',
    label: findingsTable.whatWasFoundAnd,
    from: 'lg',
    className: '!align-top max-w-[620px]',
    cell: (f) => <Found finding={f} />,
  },
];

function Outcome({ finding }: { finding: SiteDesignItem }) {
  const { tone, shape } = TONE[finding.outcome];
  return (
    <Tag tone={tone} shape={shape}>
      {OUTCOME_WORDS[finding.outcome]}
    </Tag>
  );
}

function Found({ finding }: { finding: SiteDesignItem }) {
  return (
    <>
      <p>{finding.words}</p>
      {finding.remedy && (
        <p className="mt-1">
          <span className="font-medium">{findingsTable.toDo}</span>
          {finding.remedy}
        </p>
      )}
      {finding.alternatives.length > 0 && (
        <p className="mt-1 text-sm text-ink-2">
          {findingsTable.orAlternatives(finding.alternatives.join(' Or: '))}
        </p>
      )}
      <p className="mt-1 text-sm text-ink-2">{finding.clause}</p>
    </>
  );
}

/** One line a finding; on a phone everything that it says stands under its name. */
export function FindingsTable({ rows, view, onChange, empty }: Props) {
  return (
    <Table
      caption={findingsTable.designChecksWithOutcome}
      columns={COLUMNS}
      rows={rows}
      rowKey={(f) => `${f.key} ${f.words}`}
      sorting={{ key: view.sort, descending: view.order === 'up' }}
      onSort={({ key }) => {
        const sort = key as DesignView['sort'];
        onChange({ sort, order: sort === view.sort && view.order === 'down' ? 'up' : 'down' });
      }}
      empty={<div className="py-3">{empty}</div>}
    />
  );
}
