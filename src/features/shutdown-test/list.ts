import { WORST } from '../../domain/commissioning/shutdown-test';
import { countAtStart, counted, listed } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import type { ShutdownTestList, TestListView, TestRow, ZoneStanding } from '../../schemas/api/shutdown-test';

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
      heading: 'There is no zone to test yet',
      sentence: 'Name an initiator and its zone on the as-built first.',
    };
  const failed = zones.filter((z) => z.result === 'failed');
  const never = zones.filter((z) => z.result === null);
  const open = zones.filter((z) => z.result === 'consistent' || z.result === 'not_witnessed');
  const partly = zones.filter((z) => z.result !== null && z.untested.length > 0);
  if (failed.length > 0)
    return {
      heading: `${named(failed)} failed the shutdown test`,
      sentence:
        'Treat what failed as live, whatever the initiator says, find the cause, then repeat the test for the failed strings.',
    };
  if (never.length > 0)
    return {
      heading: `${named(never)} ${never.length === 1 ? 'has' : 'have'} not been tested`,
      sentence: 'Until a rated instrument has shown it, nobody knows that the initiator shuts it down.',
    };
  if (open.length > 0)
    return {
      heading: `${named(open)}: no rated instrument has shown the shutdown`,
      sentence: 'Reports of units decide nothing. Read at the home runs within the time limit.',
    };
  if (partly.length > 0) {
    const missing = partly.flatMap((z) => z.untested);
    return {
      heading: `${countAtStart(missing.length)} ${missing.length === 1 ? 'string has' : 'strings have'} not been tested`,
      sentence: `${missing.length <= 6 ? listed(missing) : counted(missing.length, 'string')} came to ${named(partly)} without a test.`,
    };
  }
  const last = zones
    .flatMap((z) => z.test?.at ?? [])
    .sort()
    .at(-1);
  return {
    heading:
      zones.length === 1
        ? `${named(zones)} passed its shutdown test`
        : `All ${zones.length} zones passed their shutdown tests`,
    sentence: `A result speaks of the day of the test${last ? `, last ${longDate(last, site.timeZone)}` : ''}. Shutdown is not isolation.`,
  };
}
