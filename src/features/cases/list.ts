import { CASE_STATES, isClosed } from '../../domain/cases/cases';
import { CASE_KIND_WORDS } from '../../words/domain-cases';
import type { CaseItem, CasesPage, CasesView } from '../../schemas/api/cases';
import { caseBoardList } from '../../words/case-board';
import { listed } from '../../drawings/numbers';
import { capital } from '../../words/domain-counts';

export const CASES_DEFAULTS: CasesView = {
  look: 'board',
  q: '',
  who: 'all',
  due: 'all',
  site: 'all',
  kind: 'all',
  show: 'current',
  sort: 'changed',
  dir: 'desc',
};

const words = new Intl.Collator('en', { sensitivity: 'base', numeric: true });

/** Names that stand in for "none": those come last, whichever way it is sorted. */
const text = (a: string | null, b: string | null, flip: number): number =>
  a === null || b === null ? (a === null ? 1 : 0) - (b === null ? 1 : 0) : flip * words.compare(a, b);

function compared(a: CaseItem, b: CaseItem, view: CasesView): number {
  const flip = view.dir === 'asc' ? 1 : -1;
  switch (view.sort) {
    case 'number':
      return flip * (a.number - b.number);
    case 'title':
      return flip * words.compare(a.title, b.title);
    case 'site':
      return flip * words.compare(a.siteName, b.siteName);
    case 'state':
      return flip * (CASE_STATES.indexOf(a.state) - CASE_STATES.indexOf(b.state));
    case 'assignee':
      return text(a.assignee?.name ?? null, b.assignee?.name ?? null, flip);
    case 'due':
      return text(a.dueOn, b.dueOn, flip);
    case 'changed':
      return flip * a.changedAt.localeCompare(b.changedAt);
  }
}

/** What a search looks at. */
const textOf = (c: CaseItem): string =>
  [
    `#${c.number}`,
    c.title,
    c.siteName,
    c.assignee?.name ?? '',
    c.openedBy,
    CASE_KIND_WORDS[c.kind],
    ...c.strings.map((s) => s.name),
  ]
    .join(' ')
    .toLocaleLowerCase();

/** The cases of a view: filtered and sorted; newer numbers settle what is equal. */
export function listedCases(cases: readonly CaseItem[], view: CasesView, me: string): CaseItem[] {
  const typed = view.q.trim().toLocaleLowerCase().split(/\s+/).filter(Boolean);
  return cases
    .filter((c) => view.show !== 'open' || !isClosed(c.state))
    .filter((c) => view.who !== 'mine' || c.assignee?.id === me)
    .filter((c) => view.who !== 'unassigned' || (c.assignee === null && !isClosed(c.state)))
    .filter((c) => view.due !== 'overdue' || c.overdue)
    .filter((c) => view.site === 'all' || c.siteId === view.site)
    .filter((c) => view.kind === 'all' || c.kind === view.kind)
    .filter((c) => typed.every((word) => textOf(c).includes(word)))
    .sort((a, b) => compared(a, b, view) || b.number - a.number);
}

/** The heading of the page and what follows from it. */
export function casesFinding({ cases, me }: CasesPage): { finding: string; sentence: string } {
  const open = cases.filter((c) => !isClosed(c.state));
  const overdue = open.filter((c) => c.overdue).length;
  const mine = open.filter((c) => c.assignee?.id === me).length;
  const nobodys = open.filter((c) => c.assignee === null).length;
  if (open.length === 0)
    return {
      finding: caseBoardList.noCaseIsOpen,
      sentence: caseBoardList.openOneFromA,
    };
  const parts = [
    overdue > 0 ? caseBoardList.areOverdue(overdue) : caseBoardList.noneIsOverdue,
    mine > 0 ? caseBoardList.areYours(mine) : '',
    nobodys > 0 ? caseBoardList.nobodyYet(nobodys) : '',
  ].filter(Boolean);
  return {
    finding: open.length === 1 ? caseBoardList.oneCaseIsOpen : caseBoardList.casesAreOpen(open.length),
    sentence: `${capital(listed(parts))}.`,
  };
}
