import { ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { listed } from '../../drawings/numbers';
import { clock, fullTime, localDay, longDate } from '../../drawings/times';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import { paths } from '../../schemas/paths';
import type { ShutdownTestList, TestListView, TestRow, ZoneStanding } from '../../schemas/api/shutdown-test';
import { RepeatTest } from './RepeatTest';
import { ResultTag } from './ResultTag';
import { LIST_DEFAULTS, listFinding, listedTests } from './list';
import { testList } from '../../words/shutdown-test-report';

interface Props {
  list: ShutdownTestList;
  view: TestListView;
  mayRun: boolean;
}

/** The shutdown tests of a site: what holds of each zone, and every test that was made. */
export function TestList({ list, view: initial, mayRun }: Props) {
  const [view, change] = useViewInUrl(initial, LIST_DEFAULTS);
  const { site, zones } = list;
  const finding = listFinding(list);
  const rows = listedTests(list.tests, view);
  const columns: Column<TestRow>[] = [
    {
      key: 'zone',
      label: testList.zone,
      sortable: true,
      cell: (t) => (
        <a
          className="inline-flex min-h-[44px] items-center font-semibold hover:underline"
          href={paths.shutdownTest(site.id, t.id)}
        >
          {t.zone}
        </a>
      ),
    },
    {
      key: 'result',
      label: testList.result,
      sortable: true,
      cell: (t) => (
        <span className="inline-flex flex-wrap items-center gap-1">
          {t.result ? (
            <ResultTag result={t.result} />
          ) : (
            <Tag tone="outline">{t.state === 'draft' ? testList.underWay : testList.endedNotSigned}</Tag>
          )}
          {t.superseded && <Tag>{testList.superseded}</Tag>}
        </span>
      ),
    },
    {
      key: 'strings',
      label: testList.strings,
      from: 'md',
      cell: (t) =>
        t.state === 'signed'
          ? `${testList.countedStringsString(t.strings)}${t.failed > 0 ? testList.failed(t.failed) : ''}${t.carried > 0 ? testList.fromAnEarlierTest(t.carried) : ''}`
          : t.reason,
    },
    { key: 'by', label: testList.signedOrStartedBy, sortable: true, from: 'sm', cell: (t) => t.by },
    {
      key: 'at',
      label: testList.when,
      sortable: true,
      cell: (t) => <When at={t.at} list={list} />,
    },
  ];
  return (
    <>
      <Heading
        crumbs={[
          { label: testList.commissioning, href: paths.commissioning() },
          { label: site.name, href: paths.commissioningSite(site.id) },
        ]}
        finding={finding.heading}
        sentence={finding.sentence}
      />
      <div className="grid gap-5">
        <Caution strong={testList.shutdownIsNotIsolation}>{testList.eachModuleAndIts}</Caution>
        <div className="grid gap-5 lg:grid-cols-2">
          {zones.map((z) => (
            <ZoneSheet key={z.zone.id} z={z} list={list} mayRun={mayRun} />
          ))}
        </div>
        <Sheet
          id="tests"
          title={testList.tests}
          flush
          aside={
            <ButtonLink href={withQuery(paths.api.shutdownTestsCsv(site.id), { ...view })} download>
              {testList.testsAsCsv}
            </ButtonLink>
          }
        >
          <div className="mb-3 flex flex-wrap items-end gap-x-5 gap-y-2">
            <Segmented
              label={testList.whichTests}
              options={[
                { value: 'in_force', label: testList.inForceAndUnder },
                { value: 'unsigned', label: testList.notSigned },
                { value: 'superseded', label: testList.superseded },
                { value: 'all', label: testList.allTests(list.tests.length) },
              ]}
              value={view.show}
              onChange={(show) => change({ show })}
            />
            {zones.length > 1 && (
              <Choice
                label={testList.zone}
                value={view.zone}
                options={[
                  { value: '', label: testList.allZones },
                  ...zones.map((z) => ({ value: z.zone.name, label: z.zone.name })),
                ]}
                onChange={(zone) => change({ zone })}
              />
            )}
            <Field
              label={testList.search}
              className="min-w-[200px]"
              type="search"
              value={view.q}
              onChange={(e) => change({ q: e.target.value }, 'typed')}
            />
          </div>
          <Table
            caption={testList.shutdownTests}
            columns={columns}
            rows={rows}
            rowKey={(t) => t.id}
            sorting={{ key: view.sort, descending: view.order === 'down' }}
            onSort={(s) =>
              change({ sort: s.key as TestListView['sort'], order: s.descending ? 'down' : 'up' })
            }
            empty={
              <Notice
                kind="empty"
                title={list.tests.length === 0 ? testList.noTestHasBeen : testList.noTestFitsThis}
              />
            }
          />
        </Sheet>
      </div>
    </>
  );
}

/** The clock today, the whole date before: tests are years apart. */
function When({ at, list }: { at: string; list: ShutdownTestList }) {
  const { timeZone } = list.site;
  return (
    <time dateTime={at} title={fullTime(at, timeZone)}>
      {localDay(at, timeZone) === localDay(list.at, timeZone) ? clock(at, timeZone) : longDate(at, timeZone)}
    </time>
  );
}

function ZoneSheet({ z, list, mayRun }: { z: ZoneStanding; list: ShutdownTestList; mayRun: boolean }) {
  const { site, at } = list;
  return (
    <Sheet
      id={`zone-${z.zone.id}`}
      title={z.zone.name}
      aside={z.result ? <ResultTag result={z.result} /> : <Tag tone="outline">{testList.notTested}</Tag>}
    >
      <p className="text-ink-2">
        {z.initiator}
        {z.initiatorPlace && `, ${z.initiatorPlace}`} · {testList.countedStringsString(z.strings)}
      </p>
      {z.test && (
        <p className="mt-1">
          {testList.newest}
          <a className="text-petrol hover:underline" href={paths.shutdownTest(site.id, z.test.ref)}>
            <When at={z.test.at} list={list} />, {z.test.signedBy}
          </a>
        </p>
      )}
      {z.test && z.untested.length > 0 && (
        <p className="mt-1 text-rust-ink">{testList.withoutTest(z.untested.length, listed(z.untested))}</p>
      )}
      <div className="mt-4 flex flex-wrap gap-2">
        {z.draft ? (
          <>
            <ButtonLink weight="primary" href={paths.shutdownTest(site.id, z.draft.ref)}>
              {mayRun ? testList.goOnWithThe : testList.watchTheTest}
            </ButtonLink>
            <p className="self-center text-sm text-ink-2">
              {testList.started}
              <SiteTime at={z.draft.startedAt} now={at} timeZone={site.timeZone} />
              {testList.byStartedBy(z.draft.startedBy)}
            </p>
          </>
        ) : mayRun && z.strings > 0 ? (
          <>
            {z.test && z.result !== 'passed' && (
              <RepeatTest
                siteId={site.id}
                zone={z.zone.id}
                follows={z.test.ref}
                label={testList.repeatForWhatIs}
              />
            )}
            <RepeatTest
              siteId={site.id}
              zone={z.zone.id}
              label={z.test ? testList.startANewTest : testList.startTheTest}
              weight={z.test ? 'plain' : 'primary'}
            />
          </>
        ) : null}
        {!z.draft && !mayRun && <p className="text-ink-2">{testList.aManagerOrA}</p>}
      </div>
    </Sheet>
  );
}
