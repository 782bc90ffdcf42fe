import type { Actor } from '../../domain/access/permissions';
import { isolationFinding } from '../../domain/commissioning/isolation';
import {
  BEFORE_INTERVALS,
  type Between,
  type IsolationFinding,
  type IsolationWatch,
} from '../../domain/commissioning/isolation-watch';
import { median } from '../../domain/output/robust';
import type {
  IsolationCurrents,
  IsolationFindingView,
  IsolationPage,
  IsolationRun,
  IsolationStart,
} from '../../schemas/api/isolation';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import {
  endIsolation,
  insertIsolation,
  isolableString,
  isolationsOf,
  openIsolation,
  reportIntervalOf,
  watchedCurrents,
  type IsolationRow,
} from '../queries/isolation';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { visibleSite } from '../queries/visible-site';
import { isolationRefusals } from '../../words/refusals-cases';

/** A watch that nobody stops ends by itself. */
export const WATCH_MAX_S = 30 * 60;
/** Frames arrive a little after their time. */
const LATE_S = 5;

const endsAt = (row: Pick<IsolationRow, 'startedAt'>): Date =>
  new Date(row.startedAt.getTime() + WATCH_MAX_S * 1000);
const overdue = (row: IsolationRow, at: Date): boolean => row.stoppedAt === null && at >= endsAt(row);

async function watchOf(tx: Tx, siteId: number, row: IsolationRow, at: Date): Promise<IsolationWatch> {
  const reportIntervalS = await reportIntervalOf(tx, siteId);
  const until = new Date(Math.min(at.getTime(), endsAt(row).getTime()) + LATE_S * 1000);
  const from = new Date(row.startedAt.getTime() - (BEFORE_INTERVALS + 1) * reportIntervalS * 1000);
  const currents = await watchedCurrents(tx, siteId, { from, to: until, began: row.startedAt });
  return {
    string: row.stringName,
    startedAtS: row.startedAt.getTime() / 1000,
    nowS: until.getTime() / 1000,
    reportIntervalS,
    ...currents,
  };
}

const iso = (seconds: number): string => new Date(seconds * 1000).toISOString();
const span = (b: Between | null) => b && { after: iso(b.afterS), by: iso(b.byS) };
const viewOf = (finding: IsolationFinding): IsolationFindingView => ({
  ...finding,
  dropped: span(finding.dropped),
  returned: span(finding.returned),
  units: finding.units.map((u) => ({ ...u, dropped: span(u.dropped) })),
});

function runOf(row: IsolationRow, finding: IsolationFinding, at: Date): IsolationRun {
  const timedOut = overdue(row, at);
  return {
    id: row.id,
    stringId: row.stringId,
    stringName: row.stringName,
    startedAt: row.startedAt.toISOString(),
    startedBy: row.startedBy,
    personOnSite: row.personOnSite,
    endsAt: endsAt(row).toISOString(),
    stoppedAt: (timedOut ? endsAt(row) : row.stoppedAt)?.toISOString() ?? null,
    stoppedBy: row.stoppedBy,
    finding: viewOf(finding),
  };
}

/** Lines to draw: each string's median current, and by itself every unit of the string or that fell with it. */
function currentsOf(watch: IsolationWatch, finding: IsolationFinding): IsolationCurrents | null {
  const at = [...new Set(watch.units.flatMap((u) => u.samples.map((s) => s.atS)))].sort((a, b) => a - b);
  if (at.length === 0) return null;
  const index = new Map(at.map((t, i) => [t, i]));
  const line = (samples: IsolationWatch['units'][number]['samples']): (number | null)[] => {
    const values = new Array<number | null>(at.length).fill(null);
    for (const s of samples) values[index.get(s.atS)!] = s.current;
    return values;
  };
  const lines = new Map(watch.units.map((u) => [u, line(u.samples)]));
  const names = [...new Set(watch.units.map((u) => u.string))];
  const told = new Set(
    finding.units.flatMap((u) => (u.string === watch.string || u.fate === 'other_dropped' ? [u.serial] : [])),
  );
  return {
    at,
    strings: names.map((name) => {
      const members = watch.units.flatMap((u) => (u.string === name ? [lines.get(u)!] : []));
      return {
        name,
        current: at.map((_, i) => {
          const values = members.flatMap((m) => m[i] ?? []);
          return values.length === 0 ? null : median(values);
        }),
      };
    }),
    units: watch.units
      .filter((u) => told.has(u.serial))
      .map((u) => ({ label: `${u.string}-${u.position}`, string: u.string, current: lines.get(u)! })),
  };
}

/** The open watch live, and the ended ones as they were concluded. */
export async function readIsolations(tx: Tx, siteId: number, at: Date): Promise<IsolationPage> {
  const rows = await isolationsOf(tx, siteId);
  const page: IsolationPage = {
    at: at.toISOString(),
    reportIntervalS: await reportIntervalOf(tx, siteId),
    open: null,
    currents: null,
    runs: [],
  };
  for (const [i, row] of rows.entries()) {
    if (row.finding && i > 0) {
      page.runs.push(runOf(row, row.finding, at));
      continue;
    }
    // the newest one's currents are drawn; one whose time was up is concluded from its frames
    const watch = await watchOf(tx, siteId, row, row.stoppedAt ?? at);
    const finding = row.finding ?? isolationFinding(watch);
    if (i === 0) page.currents = currentsOf(watch, finding);
    const run = runOf(row, finding, at);
    if (run.stoppedAt === null) page.open = run;
    else page.runs.push(run);
  }
  return page;
}

/** @throws AppError not_found */
export async function isolationPage(tx: Tx, siteRef: string, at: Date): Promise<IsolationPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return readIsolations(tx, site.id, at);
}

async function conclude(
  tx: Tx,
  siteId: number,
  row: IsolationRow,
  ended: { at: Date; personId: number | null },
): Promise<boolean> {
  const finding = isolationFinding(await watchOf(tx, siteId, row, ended.at));
  return endIsolation(tx, { id: row.dbId, at: ended.at, personId: ended.personId, finding });
}

/**
 * Begins to watch whose current goes to zero while a named person on site isolates one string. Wakeline only watches.
 * @throws AppError not_found · invalid (a string of another site) · conflict (a watch runs)
 */
export async function startIsolation(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  start: IsolationStart,
  at: Date,
  address: string | null,
): Promise<IsolationPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const string = await isolableString(tx, site.id, start.string);
  if (!string)
    throw new AppError('invalid', {
      message: isolationRefusals.notOfSite(site.name),
      fields: [{ field: 'string', message: isolationRefusals.chooseString }],
    });
  const before = await openIsolation(tx, site.id);
  if (before && overdue(before, at))
    await conclude(tx, site.id, before, { at: endsAt(before), personId: null });
  const run = await insertIsolation(tx, {
    siteId: site.id,
    stringId: string.id,
    personId: actor.personId,
    personOnSite: start.personOnSite,
    at,
  });
  if (!run) {
    const open = await openIsolation(tx, site.id);
    throw new AppError('conflict', {
      message: open
        ? isolationRefusals.watchedAlready(open.stringName, open.startedBy, open.personOnSite)
        : isolationRefusals.startedMeanwhile,
    });
  }
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'isolation.start',
    subject: `site ${site.ref}`,
    siteId: site.id,
    stringId: string.id,
    after: {
      isolation: run.id,
      string: string.name,
      personOnSite: start.personOnSite,
      caution: start.caution,
    },
  });
  await tellSiteChanged(tx, site.id);
  return readIsolations(tx, site.id, at);
}

/**
 * Ends the watch of a site; what it found is kept.
 * @throws AppError not_found · conflict (none runs)
 */
export async function stopIsolation(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  at: Date,
  address: string | null,
): Promise<IsolationPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const open = await openIsolation(tx, site.id);
  const late = open !== undefined && overdue(open, at);
  const done =
    open !== undefined &&
    (await conclude(tx, site.id, open, {
      at: late ? endsAt(open) : at,
      personId: late ? null : actor.personId,
    }));
  if (!done)
    throw new AppError('conflict', {
      message: isolationRefusals.notWatched(site.name),
    });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'isolation.stop',
    subject: `site ${site.ref}`,
    siteId: site.id,
    stringId: open.stringDbId,
    before: { isolation: open.id, string: open.stringName },
  });
  await tellSiteChanged(tx, site.id);
  return readIsolations(tx, site.id, at);
}
