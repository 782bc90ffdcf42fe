import { Notice } from '../../components/ui/Notice';
import { Table, type Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { CASE_KIND_WORDS, CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import type { CaseItem, CasesView } from '../../schemas/api/cases';
import { CASE_SORTS } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { dueWords, OUTCOME_TONE, STATE_SHAPE, STATE_TONE } from './words';
import { caseTable } from '../../words/case-board';

interface Props {
  cases: readonly CaseItem[];
  at: string;
  view: CasesView;
  timeZone: string;
  onChange: (some: Partial<CasesView>) => void;
}

export function CaseTable({ cases, at, view, timeZone, onChange }: Props) {
  const columns: Column<CaseItem>[] = [
    {
      key: 'number',
      label: caseTable.no,
      sortable: true,
      from: 'sm',
      cell: (c) => <span className="text-ink-2">{c.number}</span>,
    },
    {
      key: 'title',
      label: caseTable.case,
      sortable: true,
      cell: (c) => (
        <>
          <a
            href={paths.caseFile(c.id)}
            className="-my-2 block py-2 font-medium [overflow-wrap:anywhere] hover:underline"
          >
            <span className="text-ink-2 sm:hidden">#{c.number} </span>
            {c.title}
          </a>
          <span className="block text-sm text-ink-2">
            {c.kind === 'other' ? '' : `${CASE_KIND_WORDS[c.kind]} · `}
            <span className="md:hidden">{c.siteName} · </span>
            {c.strings.map((s) => s.name).join(', ') || caseTable.noString}
          </span>
        </>
      ),
    },
    { key: 'site', label: caseTable.site, sortable: true, from: 'md', cell: (c) => c.siteName },
    {
      key: 'state',
      label: caseTable.state,
      sortable: true,
      cell: (c) => (
        <span className="flex flex-wrap gap-1.5">
          <Tag tone={STATE_TONE[c.state]} shape={STATE_SHAPE[c.state]}>
            {CASE_STATE_WORDS[c.state]}
          </Tag>
          {c.outcome && <Tag tone={OUTCOME_TONE[c.outcome]}>{CHECK_OUTCOME_WORDS[c.outcome]}</Tag>}
          {c.overdue && (
            <span className="sm:hidden">
              <Tag tone="rust">{dueWords(c)}</Tag>
            </span>
          )}
        </span>
      ),
    },
    {
      key: 'assignee',
      label: caseTable.assignedTo,
      sortable: true,
      from: 'md',
      cell: (c) => c.assignee?.name ?? <span className="text-ink-2">{caseTable.nobody}</span>,
    },
    {
      key: 'due',
      label: caseTable.due,
      sortable: true,
      from: 'sm',
      cell: (c) =>
        c.dueOn === null ? (
          <span className="text-ink-2">{caseTable.noDay}</span>
        ) : c.overdue ? (
          <Tag tone="rust">{dueWords(c)}</Tag>
        ) : (
          dueWords(c)
        ),
    },
    {
      key: 'changed',
      label: caseTable.changed,
      sortable: true,
      numeric: true,
      from: 'lg',
      cell: (c) => <RelativeTime at={c.changedAt} now={at} timeZone={timeZone} />,
    },
  ];
  return (
    <Table
      caption={caseTable.cases}
      columns={columns}
      rows={cases}
      rowKey={(c) => c.id}
      sorting={{ key: view.sort, descending: view.dir === 'desc' }}
      onSort={({ key, descending }) => {
        const sort = CASE_SORTS.find((s) => s === key);
        if (sort) onChange({ sort, dir: descending ? 'desc' : 'asc' });
      }}
      empty={<Notice kind="empty" title={caseTable.noCaseFitsThese} />}
    />
  );
}
