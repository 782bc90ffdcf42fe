import { setImmediate as turn } from 'node:timers/promises';
import {
  CURRENT_MIN,
  membershipsByString,
  ODDS_NEEDED,
  type Membership,
} from '../../domain/output/membership';
import { apartFrom, counterpartOf, typicalOf } from '../../domain/output/membership-evidence';
import { chooseMoments, momentLength } from '../../domain/output/membership-moments';
import type { MembershipPage, MembershipSuspect, MembershipUnit } from '../../schemas/api/membership';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { reportIntervalOf } from '../queries/isolation';
import { heardMoments, movedSince, muteUnits, unitCurrents, type CurrentRows } from '../queries/membership';
import { stringsNow } from '../queries/now';
import { sitesNow } from '../queries/sites-now';
import { visibleSite, type VisibleSite } from '../queries/visible-site';
import { readIsolations } from './isolation';
import { membershipWords } from '../../words/refusals-cases';

/** Suspects whose currents are drawn. */
const DRAWN_MAX = 24;

interface Read {
  rows: CurrentRows;
  /** Epoch seconds of the steps. */
  steps: number[];
  window: MembershipPage['window'];
  /** Of each string's placed units, A at each step; NaN: not reported. */
  currents: Map<number, Float64Array[]>;
}

async function read(tx: Tx, siteId: number, hours: number, at: Date): Promise<Read> {
  const from = new Date(at.getTime() - hours * 3_600_000);
  const lengthS = momentLength(await reportIntervalOf(tx, siteId));
  const window = { from, to: at, lengthS };
  const { stepS, atS: steps } = chooseMoments(await heardMoments(tx, siteId, window), lengthS);
  const rows = await unitCurrents(tx, siteId, window, steps);
  const moved = await movedSince(tx, siteId, from);
  const index = new Map(steps.map((s, i) => [s, i]));
  const currents = new Map(
    rows.strings.map((s) => [s.id, s.slots.map(() => new Float64Array(steps.length).fill(NaN))]),
  );
  const strings = new Map(rows.strings.map((s) => [s.id, s]));
  for (const frame of rows.frames) {
    const string = strings.get(frame.stringId);
    string?.slots.forEach(({ position, serial }, k) => {
      const mA = frame.current[position - 1];
      if (mA === null || mA === undefined || frame.moment < (moved.get(serial) ?? 0)) return;
      currents.get(string.id)![k]![index.get(frame.moment)!] = mA / 1000;
    });
  }
  const typical = [...currents.values()].map((units) => typicalOf(units));
  const withCurrent = steps.filter((_, q) => typical.some((t) => t[q]! >= CURRENT_MIN)).length;
  return {
    rows,
    steps,
    currents,
    window: {
      from: from.toISOString(),
      to: at.toISOString(),
      hours,
      stepS,
      steps: steps.length,
      withCurrent,
    },
  };
}

interface JudgedUnit extends Membership {
  view: MembershipUnit;
  unitCurrent: Float64Array;
  own: Float64Array;
}

interface Judgement {
  units: JudgedUnit[];
  typicals: ReadonlyMap<string, Float64Array>;
}

async function judge({ rows, currents }: Read): Promise<Judgement> {
  const strings = rows.strings.filter((s) => s.slots.length > 0);
  if (strings.length === 0) return { units: [], typicals: new Map() };
  const byName = new Map(strings.map((s) => [s.name, s]));
  const typicals = new Map(strings.map((s) => [s.name, typicalOf(currents.get(s.id) ?? [])]));
  const judged = (m: Membership): JudgedUnit => {
    const string = byName.get(m.string)!;
    const units = currents.get(string.id) ?? [];
    const unit = units[m.unit]!;
    const own = typicalOf(units, units.length > 1 ? m.unit : null);
    const otherName = m.otherString ?? m.undecidedWith[0] ?? null;
    const other = otherName === null ? null : (typicals.get(otherName) ?? null);
    const apartOwn = apartFrom(unit, own, CURRENT_MIN);
    const slot = string.slots[m.unit]!;
    return {
      ...m,
      unitCurrent: unit,
      own,
      view: {
        stringId: string.ref,
        string: m.string,
        position: slot.position,
        serial: slot.serial,
        outcome: m.outcome,
        fitsOwn: m.outcome === 'here' || (m.outcome === 'cant_tell' && m.logOdds <= ODDS_NEEDED),
        otherString: m.otherString,
        otherStringId: m.otherString === null ? null : (byName.get(m.otherString)?.ref ?? null),
        logOdds: m.logOdds,
        apartOwn: apartOwn?.share ?? null,
        apartOther: other && (apartFrom(unit, other, CURRENT_MIN)?.share ?? null),
        steps: apartOwn?.steps ?? 0,
        undecidedWith: m.undecidedWith,
        words: m.words,
      },
    };
  };
  const told: JudgedUnit[] = [];
  for (const units of membershipsByString(
    strings.map((s) => ({ name: s.name, currents: currents.get(s.id) ?? [] })),
    { accuracy: Math.max(...strings.map((s) => s.currentAccuracy)) },
  )) {
    told.push(...units.map(judged));
    await turn(); // pages and loggers are served by the same process
  }
  return { units: told, typicals };
}

const known = (values: Float64Array): (number | null)[] =>
  Array.from(values, (v) => (Number.isNaN(v) ? null : Math.round(v * 1000) / 1000));

/** Units that don't fit their own string, and who of them may stand in whose place. */
function suspectsOf({ units, typicals }: Judgement, steps: readonly number[]): MembershipSuspect[] {
  const misfits = units
    .filter((j) => !j.view.fitsOwn)
    .map((j) => ({ j, string: j.string, current: j.unitCurrent, apart: j.view.apartOwn ?? 0 }))
    .sort((a, b) => Number(b.j.outcome === 'elsewhere') - Number(a.j.outcome === 'elsewhere'));
  return misfits.slice(0, DRAWN_MAX).map((misfit): MembershipSuspect => {
    const { j } = misfit;
    const pair = j.outcome === 'fits_none' ? null : counterpartOf(misfit, misfits, typicals);
    // where several strings fit alike, the counterpart's is the one to look at
    const otherName = j.otherString ?? pair?.string ?? j.undecidedWith[0] ?? null;
    const other = otherName === null ? null : (typicals.get(otherName) ?? null);
    return {
      ...j.view,
      apartOther: other && (apartFrom(j.unitCurrent, other, CURRENT_MIN)?.share ?? null),
      counterpart: pair && {
        stringId: pair.j.view.stringId,
        string: pair.j.view.string,
        position: pair.j.view.position,
        serial: pair.j.view.serial,
      },
      series: {
        at: [...steps],
        unit: known(j.unitCurrent),
        own: known(j.own),
        otherName,
        other: other ? known(other) : new Array<null>(steps.length).fill(null),
      },
    };
  });
}

/** Why a unit can't be told, as a reason that several share. */
function reasonOf(j: JudgedUnit): string {
  if (j.view.steps === 0) return membershipWords.noneWorthJudging;
  if (j.view.steps < 12) return membershipWords.tooFewReports;
  if (j.undecidedWith.length > 0) return membershipWords.tooAlike;
  return membershipWords.tooFewWhileAllRan;
}

function reasonsOf(judged: readonly JudgedUnit[]): MembershipPage['reasons'] {
  const reasons = new Map<string, { units: number; strings: Set<string> }>();
  for (const j of judged) {
    if (j.outcome !== 'cant_tell' || !j.view.fitsOwn) continue;
    const why = reasonOf(j);
    const reason = reasons.get(why) ?? { units: 0, strings: new Set() };
    reason.units += 1;
    reason.strings.add(j.string);
    reasons.set(why, reason);
  }
  return [...reasons]
    .map(([why, { units, strings }]) => ({ why, units, strings: [...strings] }))
    .sort((a, b) => b.units - a.units);
}

/** Every unit with what its current says of where it sits, for a list. */
export async function membershipUnits(
  tx: Tx,
  siteRef: string,
  hours: number,
  at: Date,
): Promise<{ site: VisibleSite; units: MembershipUnit[] }> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const { units } = await judge(await read(tx, site.id, hours, at));
  return { site, units: units.map((j) => j.view) };
}

/** The same of a site's number and a span that ends at `at`, with who may stand in whose place: for jobs. */
export async function membershipAt(
  tx: Tx,
  siteId: number,
  hours: number,
  at: Date,
): Promise<{ units: MembershipUnit[]; suspects: MembershipSuspect[] }> {
  const data = await read(tx, siteId, hours, at);
  const judgement = await judge(data);
  return { units: judgement.units.map((j) => j.view), suspects: suspectsOf(judgement, data.steps) };
}

/**
 * Which string's current each unit carried in the last hours, with the evidence of those that don't fit.
 * @throws AppError not_found
 */
export async function membershipPage(
  tx: Tx,
  siteRef: string,
  hours: number,
  at: Date,
): Promise<MembershipPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const data = await read(tx, site.id, hours, at);
  const judgement = await judge(data);
  const { units } = judgement;
  const count = (test: (j: JudgedUnit) => boolean) => units.filter(test).length;
  const [now] = await sitesNow(tx, at, [site.id]);
  return {
    at: at.toISOString(),
    site: { id: site.ref, name: site.name, place: site.place, timeZone: site.timeZone, stage: site.stage },
    window: data.window,
    counts: {
      here: count((j) => j.outcome === 'here'),
      elsewhere: count((j) => !j.view.fitsOwn && j.outcome !== 'fits_none'),
      cantTell: count((j) => j.outcome === 'cant_tell' && j.view.fitsOwn),
      fitsNone: count((j) => j.outcome === 'fits_none'),
      mute: await muteUnits(tx, site.id),
    },
    reasons: reasonsOf(units),
    suspects: suspectsOf(judgement, data.steps),
    daylight: now?.daylight ?? true,
    strings: await stringsNow(tx, at, { siteId: site.id }),
    isolation: await readIsolations(tx, site.id, at),
  };
}
