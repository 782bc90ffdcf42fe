import type { Actor } from '../../domain/access/permissions';
import {
  planImport,
  type Change,
  type ImportPlan,
  type KnownUnit,
} from '../../domain/commissioning/import/plan';
import { hasFaults, readImport, type ReadImport } from '../../domain/commissioning/import/read-import';
import type { CellFault } from '../../domain/commissioning/import/table';
import {
  IMPORT_LISTED_MAX,
  type ImportOrder,
  type ImportOutcome,
  type ImportPage,
} from '../../schemas/api/import';
import { type ImportStep } from '../../schemas/lists-and-limits';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { importParts, namesOf, slotsOfStrings } from '../queries/import-as-built';
import { knownUnits, lockAsBuilt } from '../queries/placements';
import { visibleSite } from '../queries/visible-site';
import { fingerprintOf } from '../reports/fingerprint';
import { writeImport } from './import-as-built-write';
import { importRefusals } from '../../words/refusals-as-built';

/** Told where the work is; may throw to give it up, which leaves nothing behind. */
export type OnStep = (step: ImportStep, done: number, of: number) => Promise<void>;

/** What the page of the import shows before a file is there. */
export async function importPage(tx: Tx, siteRef: string): Promise<ImportPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const names = namesOf(await importParts(tx, site));
  return { site: { id: site.ref, name: site.name, timeZone: site.timeZone, stage: site.stage }, names };
}

/** Gravest first: who loses a place, who moves, what grows, what is new. */
const WEIGHT: Record<Change['kind'], number> = {
  replaced: 0,
  moved: 1,
  string_grows: 2,
  string_made: 3,
  module_type: 4,
  roof_place: 5,
  placed: 6,
};

function outcomeOf(
  rows: number,
  plan: ImportPlan,
  faults: readonly CellFault[],
  written: boolean,
): ImportOutcome {
  const counts: ImportOutcome['counts'] = {};
  for (const change of plan.changes) counts[change.kind] = (counts[change.kind] ?? 0) + 1;
  return {
    written,
    rows,
    unchanged: plan.unchanged,
    counts,
    changes: [...plan.changes].sort((a, b) => WEIGHT[a.kind] - WEIGHT[b.kind]).slice(0, IMPORT_LISTED_MAX),
    faultCount: faults.filter((f) => f.weight === 'fault').length,
    faults: faults.slice(0, IMPORT_LISTED_MAX),
    fingerprint: fingerprintOf(plan.changes),
  };
}

/** The units that the file names, where they sit now. */
async function unitsOf(
  tx: Tx,
  site: { id: number; organisationId: number },
  read: ReadImport,
): Promise<KnownUnit[]> {
  const serials = [...new Set(read.rows.flatMap((r) => r.serial ?? []))];
  const units = await knownUnits(tx, site.organisationId, serials);
  return [...units.values()].map((u) => ({
    serial: u.serial,
    unitType: u.unitTypeName,
    at: u.sits && {
      site: u.sits.siteName,
      thisSite: u.sits.siteId === site.id,
      string: u.sits.stringName ?? '',
      position: u.sits.position ?? 0,
    },
  }));
}

/** Faults as fields of a problem: `rows.LINE.COLUMN`, LINE as in the file. */
function refusal(faults: readonly CellFault[]): AppError {
  const grave = faults.filter((f) => f.weight === 'fault');
  const [first] = grave;
  const where = first ? importRefusals.firstWrong(first.row, first.column, first.message) : '';
  return new AppError('invalid', {
    message: importRefusals.cellsWrong(grave.length, where),
    fields: grave
      .slice(0, IMPORT_LISTED_MAX)
      .map((f) => ({ field: `rows.${f.row}.${f.column}`, message: `${f.message}. ${f.remedy}` })),
  });
}

/**
 * Checks an import, and with `apply` writes it: strings that are new, slots, and who sits where; all of it or nothing,
 * history kept. The same file a second time changes nothing.
 *
 * @throws AppError not_found (no such site) · invalid (fields `rows.LINE.COLUMN`) · conflict (the as-built has changed
 * since the person looked)
 */
export async function importAsBuilt(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  order: ImportOrder,
  how: { at: Date; address: string | null },
  onStep: OnStep,
): Promise<ImportOutcome> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const apply = order.mode === 'apply';
  // what is compared must still stand when it is written
  if (apply) await lockAsBuilt(tx, [site.id]);
  const parts = await importParts(tx, site);
  const total = order.table.rows.length;
  await onStep('reading', 0, total);
  const read = readImport(order.table, order.choices, namesOf(parts));
  await onStep('comparing', 0, total);
  const units = await unitsOf(tx, site, read);
  const strings = [...new Set(read.rows.map((r) => r.string))];
  const slots = await slotsOfStrings(tx, site.id, strings);
  const plan = planImport(read.rows, read.newStrings, namesOf(parts).strings, slots, units);
  const faults = [...read.faults, ...plan.faults].sort((a, b) => a.row - b.row);
  if (!apply) return outcomeOf(total, plan, faults, false);

  if (hasFaults(faults)) throw refusal(faults);
  if (plan.changes.length > 0 && order.seen !== fingerprintOf(plan.changes))
    throw new AppError('conflict', {
      message: importRefusals.changedNothingImported,
      fields: [{ field: 'seen', message: importRefusals.changed }],
    });
  if (plan.changes.length > 0)
    await writeImport(tx, actor, site.id, parts, read, plan, slots, { ...how, reason: order.reason }, onStep);
  return outcomeOf(total, plan, faults, plan.changes.length > 0);
}
