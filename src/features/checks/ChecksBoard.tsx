import { Suspense, useMemo, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { StepsBeside } from '../../components/commissioning/StepsBeside';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { api } from '../../lib/api';
import { late } from '../../lib/late';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { ChecksPage, ChecksView } from '../../schemas/api/checks-page';
import { paths } from '../../schemas/paths';
import { CHECKS_DEFAULTS, counted, listedRows, rowsOf } from './rows';
import { Matrix } from './Matrix';
import { useSigning } from './signing';
import { CellMark } from './CellMark';
import { MARK_WORDS, checksHeading, checksSentence } from './words';
import { checksBoard } from '../../words/checks';

interface Props {
  initial: ChecksPage;
  view: ChecksView;
  mayWrite: boolean;
  mayRecordEvidence: boolean;
}

const StringChecks = late(async () => (await import('./StringChecks')).StringChecks);

const SHOWN: Record<ChecksView['show'], string> = {
  all: checksBoard.all,
  open: checksBoard.notSigned,
  blocked: checksBoard.blocked,
  ready: checksBoard.readyToSign,
  signed: checksBoard.signed,
};

/** The install checks of a site: every string against every check, and what stands in the way of a signature. */
export function ChecksBoard({ initial, view: first, mayWrite, mayRecordEvidence }: Props) {
  const site = initial.sheet.site;
  const client = queryClient();
  const key = ['checks', site.id];
  const { data: page, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) => api<ChecksPage>(paths.api.checks(site.id), { signal }),
      initialData: initial,
      // others record on the roof meanwhile
      refetchInterval: 20_000,
      refetchOnWindowFocus: true,
    },
    client,
  );
  const again = () => client.invalidateQueries({ queryKey: key });
  const [view, change] = useViewInUrl<ChecksView>(first, CHECKS_DEFAULTS);
  const [focus, setFocus] = useState<string | null>(null);
  const rows = useMemo(() => rowsOf(page), [page]);
  const shown = listedRows(rows, view);
  const open = rows.find((r) => r.string.name === view.string) ?? null;
  const [chosen, setChosen] = useState<ReadonlySet<string>>(new Set());
  const ready = rows.filter((r) => r.status === 'ready');
  const toSign = ready.filter((r) => chosen.has(r.string.id));
  const { sign, busy, faults } = useSigning(again);
  const sentence = checksSentence(rows);

  return (
    <>
      <Heading
        crumbs={[
          { label: checksBoard.commissioning, href: paths.commissioning() },
          { label: site.name, href: paths.commissioningSite(site.id) },
        ]}
        finding={checksHeading(rows)}
        sentence={
          <>
            {sentence.strong && <strong>{sentence.strong}</strong>} {sentence.rest}
          </>
        }
        actions={
          mayWrite && <ButtonLink href={paths.capture(site.id)}>{checksBoard.recordOnTheRoof}</ButtonLink>
        }
      />
      <NotRead error={error} title={checksBoard.theChecksCouldNot} className="mb-4" />
      <div className="grid gap-5 xl:grid-cols-[200px_minmax(0,1fr)]">
        <StepsBeside site={site.id} steps={page.steps} here="install_checks" />
        <div className="grid min-w-0 content-start gap-5">
          <Sheet
            id="strings"
            title={checksBoard.strings}
            flush
            aside={
              <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
                <Segmented
                  label={checksBoard.whichStrings}
                  options={(['all', 'open', 'blocked', 'ready', 'signed'] as const).map((value) => ({
                    value,
                    label: `${SHOWN[value]} ${counted(rows, value)}`,
                  }))}
                  value={view.show}
                  onChange={(show) => change({ show })}
                />
                <ButtonLink href={paths.api.checksCsv(site.id)} download>
                  {checksBoard.checksAsCsv}
                </ButtonLink>
              </div>
            }
          >
            <div className="mb-2 flex flex-wrap items-end justify-between gap-3">
              <Field
                label={checksBoard.findAStringA}
                className="w-full sm:w-[300px]"
                type="search"
                value={view.find}
                onChange={(event) => change({ find: event.target.value }, 'typed')}
              />
              {mayWrite && ready.length > 0 && (
                <div className="flex flex-wrap gap-2">
                  {toSign.length < ready.length && (
                    <Button onClick={() => setChosen(new Set(ready.map((r) => r.string.id)))}>
                      {checksBoard.chooseAllThatAre}
                    </Button>
                  )}
                  <Button
                    weight="primary"
                    disabled={toSign.length === 0 || busy}
                    onClick={() => void sign(toSign).then(() => setChosen(new Set()))}
                  >
                    {toSign.length === 0
                      ? checksBoard.signChosenStrings
                      : toSign.length === 1
                        ? checksBoard.signWhich(toSign[0]?.string.name)
                        : checksBoard.signStrings(toSign.length)}
                  </Button>
                </div>
              )}
            </div>
            {faults.length > 0 && (
              <Notice kind="failed" title={checksBoard.notSigned}>
                <ul>
                  {faults.map((f) => (
                    <li key={f}>{f}</li>
                  ))}
                </ul>
              </Notice>
            )}
            {shown.length === 0 ? (
              <Notice
                kind="empty"
                title={rows.length === 0 ? checksBoard.noStringHasSlots : checksBoard.noStringFitsWhat}
                action={
                  rows.length === 0 ? (
                    <ButtonLink href={paths.asBuilt(site.id)}>{checksBoard.enterTheAsBuilt}</ButtonLink>
                  ) : (
                    <Button onClick={() => change({ find: '', show: 'all' })}>{checksBoard.showAll}</Button>
                  )
                }
              />
            ) : (
              <Matrix
                checks={page.checks}
                rows={shown}
                view={view}
                open={view.string}
                now={page.sheet.at}
                timeZone={site.timeZone}
                onOpen={(name, check) => {
                  setFocus(check ?? null);
                  change({ string: view.string === name && !check ? '' : name });
                }}
                onSort={(sort) =>
                  change({ sort, order: view.sort === sort && view.order === 'up' ? 'down' : 'up' })
                }
                chosen={mayWrite && ready.length > 0 ? chosen : null}
                onChoose={(id, on) => {
                  const next = new Set(chosen);
                  if (on) next.add(id);
                  else next.delete(id);
                  setChosen(next);
                }}
              />
            )}
            <ul className="mt-3 flex flex-wrap gap-x-4 gap-y-1 text-sm text-ink-2">
              {(['pass', 'told', 'contradicted', 'fail', 'not_applicable', 'missing'] as const).map(
                (mark) => (
                  <li key={mark} className="flex items-center gap-1.5">
                    <CellMark mark={mark} size={14} /> {MARK_WORDS[mark]}
                  </li>
                ),
              )}
            </ul>
          </Sheet>
          {open && (
            <Suspense>
              <StringChecks
                key={open.string.id}
                page={page}
                string={open.string}
                focus={focus}
                mayWrite={mayWrite}
                mayRecordEvidence={mayRecordEvidence}
                signing={{ sign, busy }}
                onChanged={again}
                onClose={() => change({ string: '' })}
              />
            </Suspense>
          )}
          <Caution strong={checksBoard.aSignatureSaysWhat}>{checksBoard.dcStringsStayDangerous}</Caution>
        </div>
      </div>
    </>
  );
}
