import { useMutation } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { isClosed, type CaseState } from '../../domain/cases/cases';
import { CASE_STATE_WORDS } from '../../words/domain-cases';
import { api, withQuery, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { CaseItem, CasesPage, CasesView } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';
import { Board } from './Board';
import { CaseTable } from './CaseTable';
import { Filters } from './Filters';
import { CASES_DEFAULTS, casesFinding, listedCases } from './list';
import { MoveDialog } from './MoveDialog';
import { useCases } from './query';
import { useKeys } from './use-keys';
import { casesBoard } from '../../words/case-board';

interface Props {
  initial: CasesPage;
  view: CasesView;
  timeZone: string;
}

/** All cases: by state on a board, or as a list. */
export function CasesBoard({ initial, view: initialView, timeZone }: Props) {
  const client = queryClient();
  const [view, setView] = useViewInUrl(initialView, CASES_DEFAULTS);
  const { data, error, refetch } = useCases(initial, view.show, initialView.show);
  const page = data ?? initial;
  const shown = useMemo(() => listedCases(page.cases, view, page.me), [page, view]);
  const [closing, setClosing] = useState<{ item: CaseItem; to: CaseState } | null>(null);
  const [said, setSaid] = useState('');
  const move = useMutation<unknown, ApiError, { item: CaseItem; to: CaseState; note: string }>(
    {
      mutationFn: ({ item, to, note }) =>
        api(paths.api.caseFile(item.id), {
          method: 'PATCH',
          body: { act: 'state', version: item.version, state: to, note },
        }),
      onSuccess: (_, { item, to }) => {
        setClosing(null);
        setSaid(casesBoard.caseIsNowUnder(item.number, CASE_STATE_WORDS[to]));
      },
      onSettled: () => client.invalidateQueries({ queryKey: ['cases'] }),
    },
    client,
  );
  const begin = (item: CaseItem, to: CaseState) => {
    move.reset();
    setSaid('');
    if (isClosed(to)) setClosing({ item, to });
    else move.mutate({ item, to, note: '' });
  };
  const toggle = <K extends 'who' | 'due'>(key: K, value: CasesView[K]) =>
    setView({ [key]: view[key] === value ? 'all' : value });
  useKeys({
    n: () => window.location.assign(paths.caseNew()),
    b: () => setView({ look: 'board' }),
    l: () => setView({ look: 'list' }),
    m: () => toggle('who', 'mine'),
    u: () => toggle('who', 'unassigned'),
    o: () => toggle('due', 'overdue'),
  });
  const words = casesFinding(page);
  const filtered =
    view.q !== '' || view.who !== 'all' || view.due !== 'all' || view.site !== 'all' || view.kind !== 'all';

  return (
    <>
      <Heading
        finding={words.finding}
        sentence={words.sentence}
        actions={
          <ButtonLink weight="primary" href={paths.caseNew(view.site === 'all' ? {} : { site: view.site })}>
            {casesBoard.openACase}
          </ButtonLink>
        }
      />
      <div role="status" className="mb-4 empty:hidden">
        {said && <Notice kind="done" title={said} />}
      </div>
      <NotRead error={error} title={casesBoard.theCasesCouldNot} onRetry={() => refetch()} className="mb-4">
        {casesBoard.whatIsShownMay}
      </NotRead>
      {move.error && !closing && (
        <div className="mb-4">
          <Notice kind="failed" title={move.error.title}>
            {move.error.message}
          </Notice>
        </div>
      )}
      <Filters page={page} view={view} onChange={setView} />
      <div className="mb-3 flex flex-wrap items-center justify-between gap-x-4">
        <p className="text-sm text-ink-2" role="status">
          {casesBoard.countedShownCase(shown.length)}
          {filtered && (
            <>
              {casesBoard.ofCases(page.cases.length)}
              <button
                type="button"
                className="target -my-3 text-petrol underline underline-offset-[3px]"
                onClick={() => setView({ ...CASES_DEFAULTS, look: view.look, show: view.show })}
              >
                {casesBoard.showAll}
              </button>
            </>
          )}
        </p>
        <ButtonLink href={withQuery(paths.api.casesCsv(), { ...view })} download className="!text-sm">
          CSV
        </ButtonLink>
      </div>
      {page.cases.length === 0 ? (
        <Notice
          kind="empty"
          title={casesBoard.thereIsNoCase}
          action={<ButtonLink href={paths.caseNew()}>{casesBoard.openACase}</ButtonLink>}
        >
          {casesBoard.aCaseIsOpened}
        </Notice>
      ) : view.look === 'board' ? (
        <Board cases={shown} onMove={begin} />
      ) : (
        <Sheet flush>
          <CaseTable cases={shown} at={page.at} view={view} timeZone={timeZone} onChange={setView} />
        </Sheet>
      )}
      <MoveDialog
        move={closing && { number: closing.item.number, to: closing.to }}
        fault={move.error?.fault('note') ?? move.error?.message ?? null}
        busy={move.isPending}
        onMove={(note) =>
          closing &&
          move.mutate({
            // as it stands by now, where somebody changed it while the dialog was open
            item: page.cases.find((c) => c.id === closing.item.id) ?? closing.item,
            to: closing.to,
            note,
          })
        }
        onClose={() => {
          setClosing(null);
          move.reset();
        }}
      />
      {view.look === 'board' && (
        <p className="no-print mt-4 hidden text-sm text-ink-2 md:block">
          {casesBoard.dragACardOr}
          <kbd>[</kbd>
          {casesBoard.or}
          <kbd>]</kbd>
          {casesBoard.toMoveIt}
          <kbd>?</kbd>
          {casesBoard.listsAllKeys}
        </p>
      )}
    </>
  );
}
