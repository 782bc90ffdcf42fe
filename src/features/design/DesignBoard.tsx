import { useMemo } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { number } from '../../drawings/numbers';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import type { DesignView, SiteDesign } from '../../schemas/api/design';
import { paths } from '../../schemas/paths';
import { FindingsTable } from './FindingsTable';
import { InputsSheet } from './InputsSheet';
import { DESIGN_DEFAULTS, shownFindings } from './list';
import { designFinding, mayNotShutDown, stringsInShort } from './words';

interface Props {
  design: SiteDesign;
  view: DesignView;
}

const SHOWS = [
  { value: 'open', label: 'Open' },
  { value: 'exceeded', label: 'Exceeded' },
  { value: 'cannot_tell', label: 'Can’t tell' },
  { value: 'within', label: 'Within' },
  { value: 'not_required', label: 'Not required' },
  { value: 'all', label: 'All' },
] as const;

/** Every design check of a site: exceeded first, each with its figure, clause and remedy, and what it was made with. */
export function DesignBoard({ design, view: initialView }: Props) {
  const [view, change] = useViewInUrl<DesignView>(initialView, DESIGN_DEFAULTS);
  const { heading, sentence } = designFinding(design);
  const rows = useMemo(() => shownFindings(design, view), [design, view]);
  const live = mayNotShutDown(design);
  return (
    <>
      <Heading
        crumbs={[
          { label: 'Commissioning', href: paths.commissioning() },
          { label: design.siteName, href: paths.commissioningSite(design.siteId) },
          { label: 'Design checks' },
        ]}
        finding={heading}
        sentence={sentence}
        actions={<ButtonLink href={paths.asBuilt(design.siteId)}>To the as-built</ButtonLink>}
      />
      {live.length > 0 && (
        <div className="mb-5">
          <Caution strong={`Treat ${stringsInShort(live)} as live after a shutdown.`}>
            By what is entered they may not shut down as the rule set asks. Shutdown is not isolation in any
            case: each module and its leads stay at module voltage.
          </Caution>
        </div>
      )}
      {design.stringsWithoutSlots.length > 0 && (
        <div className="mb-5">
          <Notice kind="stale" title={`Not checked: ${design.stringsWithoutSlots.join(', ')}`}>
            They have no slot yet.
          </Notice>
        </div>
      )}
      <div className="grid gap-5">
        <Sheet
          flush
          title="Checks"
          id="checks"
          aside={`${number(rows.length)} of ${number(design.findings.length)}`}
        >
          <form
            action={paths.designChecks(design.siteId)}
            className="no-print mb-3 flex flex-wrap items-center gap-x-5 gap-y-2"
            onSubmit={(event) => event.preventDefault()}
          >
            <SearchInput
              name="q"
              label="Filter checks by string, clause or word"
              placeholder="String, clause or word"
              value={view.q}
              onChange={(typed) => change({ q: typed }, 'typed')}
            />
            <Segmented
              label="Which outcomes"
              name="show"
              options={SHOWS}
              value={view.show}
              onChange={(show) => change({ show })}
            />
            <ButtonLink
              href={withQuery(paths.api.designChecksCsv(design.siteId), view)}
              download
              className="ml-auto !text-sm"
            >
              CSV
            </ButtonLink>
          </form>
          <FindingsTable
            rows={rows}
            view={view}
            onChange={change}
            empty={
              design.strings === 0 ? (
                <Notice
                  kind="empty"
                  title="No string is drawn yet"
                  action={<ButtonLink href={paths.asBuilt(design.siteId)}>Draw the strings</ButtonLink>}
                >
                  Each is checked as soon as it has its slots.
                </Notice>
              ) : view.show === 'open' && view.q === '' ? (
                <Notice
                  kind="done"
                  title="Nothing is exceeded and nothing is left untold"
                  action={<Button onClick={() => change({ show: 'all' })}>Show all checks</Button>}
                />
              ) : (
                <Notice
                  kind="empty"
                  title="No check matches"
                  action={<Button onClick={() => change({ q: '', show: 'all' })}>Show all checks</Button>}
                />
              )
            }
          />
        </Sheet>
        <InputsSheet design={design} />
      </div>
    </>
  );
}
