import { Suspense, useMemo } from 'react';
import { useQuery } from '@tanstack/react-query';
import { STAGE_WORDS } from '../../words/domain-reading-stages';
import { StepsBeside } from '../../components/commissioning/StepsBeside';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { Tag, type Tone } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { volts } from '../../drawings/numbers';
import { api } from '../../lib/api';
import { late } from '../../lib/late';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { ReadingsPage, ReadingsView } from '../../schemas/api/checks-page';
import { paths } from '../../schemas/paths';
import { ReadingBand } from './ReadingBand';
import {
  READINGS_DEFAULTS,
  countOf,
  listedReadings,
  readingRows,
  stageShown,
  type Outcome,
  type ReadingRow,
} from './readings-rows';
import { OUTCOME_WORDS, readingsHeading, readingsSentence } from './readings-words';
import { readingsBoard } from '../../words/meter-readings';

const ReadingDetail = late(async () => (await import('./ReadingDetail')).ReadingDetail);

interface Props {
  initial: ReadingsPage;
  view: ReadingsView;
  mayWrite: boolean;
}
const TONES: Record<Outcome, Tone> = {
  as_expected: 'petrol',
  finding: 'rust',
  cant_tell: 'outline',
  proves_nothing: 'slate',
  unread: 'plain',
};

/** The meter readings of a site: each string at each stage, what was read and what it means. */
export function ReadingsBoard({ initial, view: first, mayWrite }: Props) {
  const site = initial.sheet.site;
  const client = queryClient();
  const key = ['readings', site.id];
  const { data: page, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) => api<ReadingsPage>(paths.api.readings(site.id), { signal }),
      initialData: initial,
      // others measure on the roof meanwhile
      refetchInterval: 20_000,
      refetchOnWindowFocus: true,
    },
    client,
  );
  const again = () => client.invalidateQueries({ queryKey: key });
  const [view, change] = useViewInUrl<ReadingsView>(first, READINGS_DEFAULTS);
  const rows = useMemo(() => readingRows(page), [page]);
  const shown = listedReadings(rows, view);
  const stages = [...new Set(rows.map((r) => r.stage))];
  const stage = stageShown(rows, view);
  const here = rows.filter((r) => stage === 'all' || r.stage === stage);
  const open = rows.find((r) => `${r.string.name}.${r.stage}` === view.string);
  const sentence = readingsSentence(rows);
  const toggle = (r: ReadingRow) => {
    const name = `${r.string.name}.${r.stage}`;
    change({ string: view.string === name ? '' : name });
  };
  const columns: Column<ReadingRow>[] = [
    {
      key: 'name',
      label: readingsBoard.string,
      sortable: true,
      cell: (r) => (
        <button
          type="button"
          aria-expanded={r === open}
          onClick={() => toggle(r)}
          className="target inline-flex flex-col items-start justify-center text-left hover:underline"
        >
          <span className="font-semibold">{r.string.name}</span>
          <span className="text-sm text-ink-2">{STAGE_WORDS[r.stage]}</span>
        </button>
      ),
    },
    {
      key: 'voltage',
      label: readingsBoard.to,
      numeric: true,
      cell: (r) => (r.between ? volts(r.between.voltage) : '–'),
    },
    {
      key: 'band',
      label: readingsBoard.againstWhatIsExpected,
      from: 'md',
      cell: (r) =>
        r.between && (
          <ReadingBand voltage={r.between.voltage} finding={r.between.finding} outcome={r.outcome} />
        ),
    },
    {
      key: 'earth',
      label: readingsBoard.andToEarth,
      numeric: true,
      from: 'lg',
      cell: (r) =>
        r.positive || r.negative
          ? `${volts(r.positive?.voltage ?? null)}, ${volts(r.negative?.voltage ?? null)}`
          : '–',
    },
    {
      key: 'outcome',
      label: readingsBoard.whatItMeans,
      sortable: true,
      cell: (r) => (
        <span className="flex flex-wrap items-center gap-x-2 gap-y-1">
          <Tag tone={TONES[r.outcome]}>{OUTCOME_WORDS[r.outcome]}</Tag>
          <span className={`text-ink-2 ${r.outcome === 'as_expected' ? 'hidden sm:inline' : ''}`}>
            {r.headline}
          </span>
        </span>
      ),
    },
    {
      key: 'at',
      label: readingsBoard.read,
      sortable: true,
      from: 'lg',
      className: 'whitespace-nowrap text-ink-2',
      cell: (r) => r.between && <SiteTime at={r.between.at} now={page.sheet.at} timeZone={site.timeZone} />,
    },
  ];
  return (
    <>
      <Heading
        crumbs={[
          { label: readingsBoard.commissioning, href: paths.commissioning() },
          { label: site.name, href: paths.commissioningSite(site.id) },
        ]}
        finding={readingsHeading(rows)}
        sentence={
          <>
            {sentence.strong && <strong>{sentence.strong}</strong>} {sentence.rest}
          </>
        }
        actions={
          mayWrite && <ButtonLink href={paths.capture(site.id)}>{readingsBoard.recordOnTheRoof}</ButtonLink>
        }
      />
      <NotRead error={error} title={readingsBoard.theReadingsCouldNot} className="mb-4" />
      <div className="grid gap-5 xl:grid-cols-[200px_minmax(0,1fr)]">
        <StepsBeside site={site.id} steps={page.steps} here="meter_readings" />
        <div className="grid min-w-0 content-start gap-5">
          <Sheet
            id="strings"
            title={readingsBoard.stringsByStage}
            flush
            aside={
              <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
                <Segmented
                  label={readingsBoard.whichReadings}
                  options={[
                    { value: 'all', label: readingsBoard.allHere(here.length) },
                    { value: 'odd', label: readingsBoard.notAsExpected(countOf(here, 'odd')) },
                    { value: 'unread', label: readingsBoard.notRead(countOf(here, 'unread')) },
                  ]}
                  value={view.show}
                  onChange={(show) => change({ show })}
                />
                <ButtonLink href={paths.api.readingsCsv(site.id)} download>
                  {readingsBoard.readingsAsCsv}
                </ButtonLink>
              </div>
            }
          >
            <div className="mb-2 flex flex-wrap items-end justify-between gap-3">
              <Field
                label={readingsBoard.findAStringA}
                className="w-full sm:w-[300px]"
                type="search"
                value={view.find}
                onChange={(event) => change({ find: event.target.value }, 'typed')}
              />
              {stages.length > 1 && (
                <Segmented
                  label={readingsBoard.stage}
                  options={[
                    ...stages.map((value) => ({ value, label: STAGE_WORDS[value] })),
                    { value: 'all' as const, label: readingsBoard.everyStage },
                  ]}
                  value={stageShown(rows, view)}
                  onChange={(stage) => change({ stage })}
                />
              )}
            </div>
            <Table
              caption={readingsBoard.meterReadingsByString}
              columns={columns}
              rows={shown}
              rowKey={(r) => r.key}
              sorting={{ key: view.sort, descending: view.order === 'down' }}
              onSort={(s) =>
                change({ sort: s.key as ReadingsView['sort'], order: s.descending ? 'down' : 'up' })
              }
              empty={
                <Notice
                  kind="empty"
                  title={rows.length === 0 ? readingsBoard.noStringHasSlots : readingsBoard.noReadingFitsWhat}
                  action={
                    rows.length > 0 && (
                      <Button onClick={() => change({ find: '', show: 'all', stage: 'all' })}>
                        {readingsBoard.showAll}
                      </Button>
                    )
                  }
                />
              }
            />
            <p className="mt-3 text-sm text-ink-2">{readingsBoard.theWashIsWhat}</p>
          </Sheet>
          {open && (
            <Suspense>
              <ReadingDetail
                key={open.key}
                page={page}
                row={open}
                mayWrite={mayWrite}
                onChanged={again}
                onClose={() => change({ string: '' })}
              />
            </Suspense>
          )}
        </div>
      </div>
    </>
  );
}
