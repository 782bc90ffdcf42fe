import { useQuery } from '@tanstack/react-query';
import { Suspense, useEffect, useMemo, useState } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { late } from '../../lib/late';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { AsBuilt, AsBuiltView, PartAdded } from '../../schemas/api/as-built';
import { paths } from '../../schemas/paths';
import { asBuiltFinding } from './finding';
import type { Editing } from './PartDialog';
import { PartsSheets, SiteSheets } from './PartsSheets';
import { asBuiltQuery } from './queries';
import { EMPTY_DRAFT, isEmpty, type SlotsDraft } from './slots-draft';
import { StringsSheet, VIEW_DEFAULTS } from './StringsSheet';
import { asBuiltBoard } from '../../words/as-built';

const TokenDialog = late(async () => (await import('./TokenDialog')).TokenDialog);
const SlotsDialog = late(async () => (await import('./SlotsDialog')).SlotsDialog);
const PartDialog = late(async () => (await import('./PartDialog')).PartDialog);

interface Props {
  initial: AsBuilt;
  view: AsBuiltView;
  mayWrite: boolean;
  timeZones: readonly string[];
}

interface TokenFor {
  logger: { id: string; serial: string; hasToken: boolean };
  token: string | null;
}

/** The as-built of a site: what stands on it, each part with its form; what is typed is kept until it is saved. */
export function AsBuiltBoard({ initial, view: initialView, mayWrite, timeZones }: Props) {
  const client = queryClient();
  const { data: built, error, refetch } = useQuery(asBuiltQuery(initial), client);
  const [view, change] = useViewInUrl(initialView, VIEW_DEFAULTS);
  const [editing, setEditing] = useState<Editing | null>(null);
  const [token, setToken] = useState<TokenFor | null>(null);
  const [drafts, setDrafts] = useState<Readonly<Record<string, SlotsDraft>>>({});
  const site = built.site.id;
  const finding = useMemo(() => asBuiltFinding(built), [built]);
  const unsaved = useMemo(
    () => new Set(Object.entries(drafts).flatMap(([id, draft]) => (isEmpty(draft) ? [] : [id]))),
    [drafts],
  );
  const open = built.strings.find((s) => s.id === view.string);

  useEffect(() => {
    if (unsaved.size === 0) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [unsaved]);

  const saved = (of: Editing, added: PartAdded | null) => {
    setEditing(null);
    const [id] = added?.ids ?? [];
    if (added?.token && id !== undefined)
      setToken({ logger: { id, serial: asBuiltBoard.justAdded, hasToken: true }, token: added.token });
    else if (of.kind === 'string' && of.id === null && added?.ids.length === 1 && id !== undefined)
      change({ string: id });
  };

  return (
    <>
      <Heading
        crumbs={[
          { label: asBuiltBoard.commissioning, href: paths.commissioning() },
          { label: built.site.name, href: paths.commissioningSite(site) },
          { label: asBuiltBoard.asBuilt },
        ]}
        finding={finding.heading}
        sentence={finding.sentence}
      />
      <p className="sr-only" role="status">
        {finding.heading}
      </p>
      <nav aria-label={asBuiltBoard.whatTheAsBuilt} className="no-print mb-6 flex flex-wrap gap-2">
        {mayWrite && <ButtonLink href={paths.asBuiltImport(site)}>{asBuiltBoard.fromAFileOr}</ButtonLink>}
        {mayWrite && <ButtonLink href={paths.serials(site)}>{asBuiltBoard.readSerialsOnSite}</ButtonLink>}
        <ButtonLink href={paths.roofPlan(site)}>{asBuiltBoard.roofPlan}</ButtonLink>
        <ButtonLink href={paths.designChecks(site)}>{asBuiltBoard.designChecks}</ButtonLink>
        <ButtonLink href={paths.asBuiltHistory(site)}>{asBuiltBoard.history}</ButtonLink>
      </nav>
      <NotRead
        error={error}
        title={asBuiltBoard.theAsBuiltCould}
        kind="failed"
        onRetry={() => refetch()}
        className="mb-6"
      >
        {asBuiltBoard.whatIsShownMay}
      </NotRead>
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_360px]">
        {/* on a phone what strings name comes between the strings and the rest */}
        <div className="contents min-w-0 content-start gap-5 lg:grid">
          <StringsSheet
            built={built}
            view={view}
            mayWrite={mayWrite}
            unsaved={unsaved}
            onView={change}
            onOpen={(string) => change({ string })}
            onAdd={(kind) => setEditing({ kind, id: null })}
          />
          <div className="order-3 grid items-start gap-5 sm:grid-cols-2">
            <SiteSheets built={built} mayWrite={mayWrite} onEdit={setEditing} />
          </div>
        </div>
        <div className="order-2 grid min-w-0 content-start items-start gap-5 sm:grid-cols-2 lg:order-none lg:grid-cols-1">
          <PartsSheets
            built={built}
            mayWrite={mayWrite}
            onEdit={setEditing}
            onToken={(logger) => setToken({ logger, token: null })}
          />
        </div>
      </div>
      {open && !editing && (
        <Suspense>
          <SlotsDialog
            key={open.id}
            built={built}
            string={open}
            draft={drafts[open.id] ?? EMPTY_DRAFT}
            mayWrite={mayWrite}
            onDraft={(draft) => setDrafts((old) => ({ ...old, [open.id]: draft }))}
            onEditString={() => setEditing({ kind: 'string', id: open.id })}
            onClose={() => change({ string: '' })}
          />
        </Suspense>
      )}
      {editing && (
        <Suspense>
          <PartDialog
            key={`${editing.kind} ${editing.id ?? 'new'}`}
            built={built}
            editing={editing}
            timeZones={timeZones}
            onClose={() => setEditing(null)}
            onSaved={saved}
          />
        </Suspense>
      )}
      {token && (
        <Suspense>
          <TokenDialog
            site={site}
            logger={{
              ...token.logger,
              serial: built.loggers.find((l) => l.id === token.logger.id)?.serial ?? token.logger.serial,
            }}
            operating={built.site.stage === 'operating'}
            token={token.token}
            onClose={() => setToken(null)}
          />
        </Suspense>
      )}
    </>
  );
}
