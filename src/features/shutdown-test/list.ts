import { WORST } from '../../domain/commissioning/test-results';
import { listed } from '../../drawings/numbers';
import type { ShutdownTestList, TestListView, TestRow, ZoneStanding } from '../../schemas/api/shutdown-test';
import { shutdownTestReportList } from '../../words/shutdown-test-report';

export const LIST_DEFAULTS: TestListView = { q: '', zone: '', show: 'in_force', sort: 'at', order: 'down' };

const SHOWN: Record<TestListView['show'], (t: TestRow) => boolean> = {
  in_force: (t) => (t.state === 'signed' && !t.superseded) || t.state === 'draft',
  superseded: (t) => t.superseded,
  unsigned: (t) => t.state !== 'signed',
  all: () => true,
};

/** The tests that a view shows, in its order. */
export function listedTests(tests: readonly TestRow[], view: TestListView): TestRow[] {
  const words = view.q.trim().toLowerCase();
  const key = (t: TestRow): string | number =>
    view.sort === 'result' ? (t.result ? WORST.indexOf(t.result) : -1) : t[view.sort];
  const sign = view.order === 'down' ? -1 : 1;
  return tests
    .filter(SHOWN[view.show])
    .filter((t) => view.zone === '' || t.zone === view.zone)
    .filter(
      (t) => words === '' || `${t.zone} ${t.by} ${t.reason} ${t.fingerprint}`.toLowerCase().includes(words),
    )
    .sort((a, b) => {
      const [x, y] = [key(a), key(b)];
      return (x < y ? -1 : x > y ? 1 : 0) * sign || b.at.localeCompare(a.at);
    });
}

export interface ListFinding {
  heading: string;
  sentence: string;
}

const named = (zones: readonly ZoneStanding[]): string => listed(zones.map((z) => z.zone.name));

/** What the tests of a site amount to: the gravest first. */
export function listFinding({ zones, site }: ShutdownTestList): ListFinding {
  if (zones.length === 0)
    return {
      heading: shutdownTestReportList.thereIsNoZone,
      sentence: shutdownTestReportList.nameAnInitiatorAnd,
    };
  const failed = zones.filter((z) => z.result === 'failed');
  const never = zones.filter((z) => z.result === null);
  const open = zones.filter((z) => z.result === 'consistent' || z.result === 'not_witnessed');
  const partly = zones.filter((z) => z.result !== null && z.untested.length > 0);
  if (failed.length > 0)
    return {
      heading: shutdownTestReportList.failedTheShutdownTest(named(failed)),
      sentence: shutdownTestReportList.treatWhatFailedAs,
    };
  if (never.length > 0)
    return {
      heading: shutdownTestReportList.notBeenTested(named(never), never.length),
      sentence: shutdownTestReportList.untilARatedInstrument,
    };
  if (open.length > 0)
    return {
      heading: shutdownTestReportList.noRatedInstrumentHas(named(open)),
      sentence: shutdownTestReportList.reportsOfUnitsDecide,
    };
  if (partly.length > 0) {
    const missing = partly.flatMap((z) => z.untested);
    return {
      heading: shutdownTestReportList.notBeenTested2(missing.length),
      sentence: shutdownTestReportList.cameToWithoutTest(missing.length, listed(missing), named(partly)),
    };
  }
  const last = zones
    .flatMap((z) => z.test?.at ?? [])
    .sort()
    .at(-1);
  return {
    heading:
      zones.length === 1
        ? shutdownTestReportList.passedItsShutdownTest(named(zones))
        : shutdownTestReportList.allZonesPassedTheir(zones.length),
    sentence: shutdownTestReportList.aResultSpeaksOf(last, site.timeZone),
  };
}
