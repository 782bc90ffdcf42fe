import { useMemo } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import type { DesignView, SiteDesign } from '../../schemas/api/design';
import { paths } from '../../schemas/paths';
import { FindingsTable } from './FindingsTable';
import { InputsSheet } from './InputsSheet';
import { DESIGN_DEFAULTS, shownFindings } from './list';
import { designFinding, mayNotShutDown, stringsInShort } from '../../words/design-sentences';
import { designBoard } from '../../words/design';

interface Props {
  design: SiteDesign;
  view: DesignView;
}

const SHOWS = [
  { value: 'open', label: designBoard.open },
  { value: 'exceeded', label: designBoard.exceeded },
  { value: 'cannot_tell', label: designBoard.cantTell },
  { value: 'within', label: designBoard.within },
  { value: 'not_required', label: designBoard.notRequired },
  { value: 'all', label: designBoard.all },
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
          { label: designBoard.commissioning, href: paths.commissioning() },
          { label: design.siteName, href: paths.commissioningSite(design.siteId) },
          { label: designBoard.designChecks },
        ]}
        finding={heading}
        sentence={sentence}
        actions={<ButtonLink href={paths.asBuilt(design.siteId)}>{designBoard.toTheAsBuilt}</ButtonLink>}
      />
      {live.length > 0 && (
        <div className="mb-5">
          <Caution strong={designBoard.treatAsLiveAfter(stringsInShort(live))}>
            {designBoard.byWhatIsEntered}
          </Caution>
        </div>
      )}
      {design.stringsWithoutSlots.length > 0 && (
        <div className="mb-5">
          <Notice kind="stale" title={designBoard.notChecked(design.stringsWithoutSlots.join(', '))}>
            {designBoard.theyHaveNoSlot}
          </Notice>
        </div>
      )}
      <div className="grid gap-5">
        <Sheet
          flush
          title={designBoard.checks}
          id="checks"
          aside={designBoard.rowsOfFindings(rows.length, design.findings.length)}
        >
          <form
            action={paths.designChecks(design.siteId)}
            className="no-print mb-3 flex flex-wrap items-center gap-x-5 gap-y-2"
            onSubmit={(event) => event.preventDefault()}
          >
            <SearchInput
              name="q"
              label={designBoard.filterChecksByString}
              placeholder={designBoard.stringClauseOrWord}
              value={view.q}
              onChange={(typed) => change({ q: typed }, 'typed')}
            />
            <Segmented
              label={designBoard.whichOutcomes}
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
                  title={designBoard.noStringIsDrawn}
                  action={
                    <ButtonLink href={paths.asBuilt(design.siteId)}>{designBoard.drawTheStrings}</ButtonLink>
                  }
                >
                  {designBoard.eachIsCheckedAs}
                </Notice>
              ) : view.show === 'open' && view.q === '' ? (
                <Notice
                  kind="done"
                  title={designBoard.nothingIsExceededAnd}
                  action={
                    <Button onClick={() => change({ show: 'all' })}>{designBoard.showAllChecks}</Button>
                  }
                />
              ) : (
                <Notice
                  kind="empty"
                  title={designBoard.noCheckMatches}
                  action={
                    <Button onClick={() => change({ q: '', show: 'all' })}>
                      {designBoard.showAllChecks}
                    </Button>
                  }
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
