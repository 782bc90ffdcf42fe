import type { Actor } from '../../domain/access/permissions';
import { readSerial } from '../../domain/commissioning/import/serial';
import {
  planPlacements,
  slotName,
  type PlaceChange,
  type PlaceFault,
  type PlacementPlan,
} from '../../domain/commissioning/as-built/plan-placements';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { inWords } from './as-built-words';
import { asBuiltSite } from '../queries/as-built-site';
import { tellAsBuiltChanged, tellSiteChanged } from '../queries/live-notices';
import { addAuditEntries, type AuditEntry } from '../queries/people';
import {
  claimHeard,
  closePlacements,
  knownUnits,
  lastChangers,
  lockAsBuilt,
  openPlacements,
  retypeUnits,
  standingSlots,
} from '../queries/placements';
import { placeUnitsRefusals } from '../../words/refusals-as-built';

export type { PlaceChange, PlaceFault } from '../../domain/commissioning/as-built/plan-placements';

/** By which way a change of the as-built came in. */
export const CHANGE_SOURCES = ['forms', 'import', 'on_site', 'roll_call', 'capture'] as const;
export type ChangeSource = (typeof CHANGE_SOURCES)[number];

export interface PlaceOptions {
  /** When it was done on the roof. */
  at: Date;
  /** Why; needed where a unit leaves its slot, and at a site that is operating. */
  reason: string;
  source: ChangeSource;
  /** A serial that sits elsewhere is taken from there. */
  move?: boolean | undefined;
  /** A unit on record with another type gets the string's. */
  retype?: boolean | undefined;
  address?: string | null | undefined;
}

export interface Placed {
  placed: number;
  removed: number;
  /** Came from another slot. */
  moved: number;
  /** Took the place of another unit. */
  replaced: number;
  unchanged: number;
}

/** Clocks of phones run ahead by so much at most, ms. */
const AHEAD_MAX_MS = 5 * 60_000;

async function planOf(
  tx: Tx,
  actor: Actor,
  siteId: number,
  changes: readonly PlaceChange[],
  options: Pick<PlaceOptions, 'at' | 'move' | 'retype'>,
): Promise<PlacementPlan> {
  const serials = changes.flatMap((c) => {
    const read = c.serial === null ? null : readSerial(c.serial);
    return read?.kind === 'serial' ? [read.serial] : [];
  });
  const slots = await standingSlots(
    tx,
    siteId,
    changes.map((c) => c.slot),
  );
  const units = await knownUnits(tx, actor.organisationId, [...new Set(serials)]);
  const plan = planPlacements({
    siteId,
    changes,
    slots,
    units,
    atMs: options.at.getTime(),
    move: options.move ?? false,
    retype: options.retype ?? false,
  });
  await nameChangers(tx, siteId, plan.faults);
  return plan;
}

/** Who was there before: asked only where somebody was. */
async function nameChangers(tx: Tx, siteId: number, faults: PlaceFault[]): Promise<void> {
  const stale = faults.filter((f) => f.kind === 'stale' && f.slot !== undefined);
  if (stale.length === 0) return;
  const names = await lastChangers(
    tx,
    siteId,
    stale.flatMap((f) => f.slot ?? []),
  );
  for (const f of stale) {
    const by = f.slot === undefined ? undefined : names.get(f.slot);
    if (by) f.message += placeUnitsRefusals.changedBy(by.name);
  }
}

/** What would be wrong with a batch as things stand; writes nothing. */
export async function checkPlacements(
  tx: Tx,
  actor: Actor,
  siteId: number,
  changes: readonly PlaceChange[],
  options: { at: Date; move?: boolean; retype?: boolean },
): Promise<PlaceFault[]> {
  return (await planOf(tx, actor, siteId, changes, options)).faults;
}

const CONFLICTS: readonly PlaceFault['kind'][] = ['stale', 'elsewhere'];

/**
 * Puts units into slots, takes them out, swaps and replaces them: the whole batch or nothing, history kept. A swap is two
 * changes in one batch. New serials become units of the organisation.
 *
 * @param changes `slot.string` is the string's public identifier
 * @throws AppError not_found (no such site) · invalid · conflict (changed by somebody meanwhile, or the serial sits
 * elsewhere); its fields are `changes.N.serial` or `changes.N.slot`, N as in `changes`, or `reason`
 */
export async function placeUnits(
  tx: Tx,
  actor: Actor,
  siteId: number,
  changes: readonly PlaceChange[],
  options: PlaceOptions,
): Promise<Placed> {
  const site = found(await asBuiltSite(tx, siteId), 'site');
  await lockAsBuilt(tx, [siteId]);
  let plan = await planOf(tx, actor, siteId, changes, options);
  const others = [...new Set(plan.vacated.map((v) => v.siteId))].filter((id) => id !== siteId);
  if (others.length > 0) {
    // taken together and looked at again: meanwhile somebody may have moved the unit there
    await lockAsBuilt(tx, [siteId, ...others]);
    plan = await planOf(tx, actor, siteId, changes, options);
  }
  refuse(plan, options, site.stage, site.nowMs);
  if (plan.moves.length === 0) return tally(plan);

  const at = new Date(plan.atMs);
  await closePlacements(tx, plan.closes, at);
  await retypeUnits(tx, plan.retyped);
  await inWords('', () =>
    openPlacements(tx, { siteId, organisationId: site.organisationId, at }, plan.opens),
  );
  await claimHeard(
    tx,
    { siteId, organisationId: site.organisationId },
    { here: plan.opens.map((o) => o.serial), gone: plan.gone },
  );
  for (const id of others)
    await claimHeard(
      tx,
      { siteId: id, organisationId: site.organisationId },
      { here: [], gone: plan.vacated.filter((v) => v.siteId === id).map((v) => v.serial) },
    );
  await addAuditEntries(tx, entriesOf(plan, site, actor, options));
  for (const id of [siteId, ...others]) {
    await tellAsBuiltChanged(tx, id);
    await tellSiteChanged(tx, id);
  }
  return tally(plan);
}

function refuse(plan: PlacementPlan, options: PlaceOptions, stage: string, nowMs: number): void {
  if (options.at.getTime() > nowMs + AHEAD_MAX_MS)
    throw new AppError('invalid', {
      message: placeUnitsRefusals.timeAhead(options.at.toISOString()),
      fields: [{ field: 'at', message: placeUnitsRefusals.timeNotCome }],
    });
  if (plan.faults.length > 0) {
    const only = plan.faults.every((f) => CONFLICTS.includes(f.kind));
    const [first] = plan.faults;
    throw new AppError(only ? 'conflict' : 'invalid', {
      message: placeUnitsRefusals.nothingChanged(first?.message ?? '', plan.faults.length - 1),
      fields: plan.faults.map((f) => ({ field: `changes.${f.index}.${f.field}`, message: f.message })),
      // of which kind each is: what may be done about it follows from that
      current: plan.faults,
    });
  }
  const leaves = plan.moves.some((m) => m.before !== null) || plan.vacated.length > 0;
  if (options.reason.trim() === '' && plan.moves.length > 0 && (leaves || stage === 'operating'))
    throw new AppError('invalid', {
      message: placeUnitsRefusals.sayWhy,
      fields: [{ field: 'reason', message: placeUnitsRefusals.sayWhyShort }],
    });
}

function tally(plan: PlacementPlan): Placed {
  const of = (kind: PlacementPlan['moves'][number]['kind']) =>
    plan.moves.filter((m) => m.kind === kind).length;
  return {
    placed: of('placed'),
    removed: of('removed'),
    moved: of('moved'),
    replaced: of('replaced'),
    unchanged: plan.unchanged,
  };
}

function entriesOf(
  plan: PlacementPlan,
  site: { id: number; organisationId: number },
  actor: Actor,
  { reason, source, address }: PlaceOptions,
): AuditEntry[] {
  const common = {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    reason: reason.trim(),
  };
  return [
    ...plan.vacated.map((v) => ({
      ...common,
      siteId: v.siteId,
      stringId: v.stringId,
      action: 'as_built.unit_removed',
      subject: `unit ${v.serial}`,
      before: { serial: v.serial },
      after: { of: v.place, serial: null, source },
    })),
    ...plan.moves.map((m) => ({
      ...common,
      siteId: site.id,
      stringId: m.slot.stringId,
      action: `as_built.unit_${m.kind}`,
      subject: `unit ${m.after ?? m.before ?? ''}`,
      before: { serial: m.before },
      after: {
        of: slotName(m.slot.stringName, m.slot.position),
        serial: m.after,
        ...(m.from === null ? {} : { from: m.from }),
        source,
      },
    })),
  ];
}
