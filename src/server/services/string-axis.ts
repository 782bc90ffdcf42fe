import { groupedBy } from '../../domain/grouped-by';
import { median } from '../../domain/output/robust';
import { sunRiseSet } from '../../domain/photovoltaics/sun/rise-set';
import { commandWords } from '../../domain/verdicts/command-words';
import { eventWords } from '../../domain/verdicts/event-words';
import type { ChartMark, StringHistory } from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { worksOfString } from '../queries/annotations';
import { siblingsOf, stringFacts, type Sibling, type StringFacts } from '../queries/string-facts';
import { commandsOfZone, eventsOfString, type HistoryPoint } from '../queries/string-history';
import { staysOf } from '../queries/string-units';
import { axisWords } from '../../words/refusals-history';

/** What every chart over a string's time shares: how finely it is read, nights, marks, gaps. */

const HOUR_S = 3600;
const DAY_S = 24 * HOUR_S;

export const noSuchString = (): AppError => new AppError('not_found', { message: axisWords.noSuchString });

/** A string and those it is held against, for a page's several questions about it. */
export interface KnownString {
  facts: StringFacts;
  siblings: Sibling[];
}

/**
 * The string of this public identifier, at this site where one is named.
 * @throws AppError not_found alike for what does not exist and what is another organisation's
 */
export async function knownString(tx: Tx, ref: string, siteRef?: string): Promise<KnownString> {
  const facts = await stringFacts(tx, ref);
  if (!facts || (siteRef !== undefined && facts.siteRef !== siteRef)) throw noSuchString();
  return { facts, siblings: await siblingsOf(tx, facts) };
}

export interface Plan {
  from: Date;
  to: Date;
  resolution: StringHistory['resolution'];
  stepS: number;
}

/** How finely a stretch of time is read: never more than some three thousand points. */
export function planFor(from: Date, to: Date, reportIntervalS: number): Plan {
  const spanS = (to.getTime() - from.getTime()) / 1000;
  if (spanS <= 36 * HOUR_S)
    return {
      from,
      to,
      resolution: 'minute',
      stepS: spanS <= 6 * HOUR_S ? reportIntervalS : Math.max(60, reportIntervalS),
    };
  if (spanS <= 45 * DAY_S) return { from, to, resolution: 'quarter', stepS: 900 };
  return { from, to, resolution: 'day', stepS: DAY_S };
}

/** Between sunset and sunrise, for stretches of up to ten days. */
export function nightsOf(
  place: { latitude: number; longitude: number },
  from: Date,
  to: Date,
): [number, number][] {
  if (to.getTime() - from.getTime() > 10 * DAY_S * 1000) return [];
  const edges: { at: number; up: boolean }[] = [];
  let upAllDay: boolean | null = null;
  for (let day = from.getTime() - DAY_S * 1000; day <= to.getTime() + DAY_S * 1000; day += DAY_S * 1000) {
    const { sunrise, sunset, sunUp } = sunRiseSet(day, place, { beyondDay: 'actual' });
    if (sunrise !== null) edges.push({ at: sunrise, up: true });
    if (sunset !== null) edges.push({ at: sunset, up: false });
    if (sunUp !== 'rises_and_sets') upAllDay = sunUp === 'all_day';
  }
  edges.sort((a, b) => a.at - b.at);
  const start = from.getTime();
  const end = to.getTime();
  const before = edges.findLast((e) => e.at <= start);
  let up = before?.up ?? upAllDay ?? true;
  let since = start;
  const nights: [number, number][] = [];
  for (const edge of [...edges.filter((e) => e.at > start && e.at < end), { at: end, up: !up }]) {
    if (!up && edge.at > since) nights.push([Math.round(since / 1000), Math.round(edge.at / 1000)]);
    up = edge.up;
    since = edge.at;
  }
  return nights;
}

interface Move {
  position: number;
  at: number;
  out: string | null;
  in: string | null;
}

/** Units that came or went within a time, by position: before a move the readings are another unit's. */
export async function movesOf(tx: Tx, stringId: number, window: { from: Date; to: Date }): Promise<Move[]> {
  const stays = await staysOf(tx, stringId, window);
  const from = window.from.getTime() / 1000;
  const to = window.to.getTime() / 1000;
  const moves: Move[] = [];
  for (const stay of stays) {
    const before = stays.findLast((s) => s.position === stay.position && s.to !== null && s.to <= stay.from);
    if (stay.from >= from && stay.from < to)
      moves.push({ position: stay.position, at: stay.from, out: before?.serial ?? null, in: stay.serial });
    const after = stays.some((s) => s.position === stay.position && s.from === stay.to);
    if (stay.to !== null && stay.to < to && !after)
      moves.push({ position: stay.position, at: stay.to, out: stay.serial, in: null });
  }
  return moves.sort((a, b) => a.at - b.at);
}

/** A string of which many units came at once was built or read in: one mark tells it. */
const MANY_MOVES = 4;

function moveMarks(moves: readonly Move[]): ChartMark[] {
  const replaced = moves.filter((m) => m.out !== null);
  return [...groupedBy(replaced, (m) => m.at)].map(([at, together]) => ({
    from: at,
    to: null,
    words:
      together.length >= MANY_MOVES
        ? axisWords.unitsExchanged(together.length)
        : together
            .map((m) => (m.in ? axisWords.unitReplaced(m.position) : axisWords.unitTakenOut(m.position)))
            .join(', '),
    tone: 'slate' as const,
  }));
}

/** Commands as stretches, what happened to the units as instants. */
export async function marksOf(tx: Tx, facts: StringFacts, plan: Plan, now: Date): Promise<ChartMark[]> {
  const commands = await commandsOfZone(tx, facts.zoneId, plan);
  const from = plan.from.getTime() / 1000;
  const to = Math.min(plan.to.getTime(), now.getTime()) / 1000;
  const stretches = commands.flatMap((c, i): ChartMark[] => {
    if (c.inForce === 'released') return [];
    const since = Math.max(from, c.since.getTime() / 1000);
    const until = Math.min(to, (commands[i + 1]?.since.getTime() ?? Infinity) / 1000);
    return until > since ? [{ from: since, to: until, words: commandWords(c.inForce), tone: 'plum' }] : [];
  });
  const events = await eventsOfString(tx, facts, plan, 60);
  const instants = events
    .filter(
      (e) =>
        // commands are drawn as stretches; a cause tells of what its own events mark already
        e.kind !== 'command' &&
        !e.kind.startsWith('cause_') &&
        (e.stringId !== null || plan.resolution === 'minute'),
    )
    .map((e): ChartMark => {
      const { words, tone } = eventWords(e.kind, e.detail);
      return { from: new Date(e.at).getTime() / 1000, to: null, words, tone };
    });
  const works = (await worksOfString(tx, facts, plan)).map((w): ChartMark => ({
    from: Math.max(from, w.from),
    to: Math.min(plan.to.getTime() / 1000, w.to),
    words: axisWords.plannedWork(w.reason),
    tone: 'slate',
  }));
  const moves = moveMarks(await movesOf(tx, facts.id, plan));
  return [...stretches, ...works, ...moves, ...instants].sort((a, b) => a.from - b.from);
}

const SLOWEST_REPORT_S = 600;

/** The spacing beyond which something is missing: from the points themselves, for a logger may report more slowly than its site is set to. */
export function gapFrom(at: readonly number[], stepS: number): number {
  const spaces = at.slice(1).map((t, i) => t - (at[i] ?? t));
  const usual = spaces.length > 0 ? Math.min(median(spaces), Math.max(stepS, SLOWEST_REPORT_S)) : stepS;
  return 2.6 * Math.max(stepS, usual);
}

/** Puts a null between points that lie further apart than their step allows, so that a gap is drawn as one. */
export function withGaps(
  points: readonly HistoryPoint[],
  stepS: number,
): Pick<StringHistory, 'at' | 'values' | 'low' | 'high' | 'energy'> {
  const out: Pick<StringHistory, 'at' | 'values' | 'low' | 'high' | 'energy'> = {
    at: [],
    values: [],
    low: [],
    high: [],
    energy: [],
  };
  const gap = gapFrom(
    points.map((p) => p.at),
    stepS,
  );
  let before = -Infinity;
  for (const p of points) {
    if (before > 0 && p.at - before > gap) {
      out.at.push(before + stepS);
      for (const column of [out.values, out.low, out.high, out.energy]) column.push(null);
    }
    out.at.push(p.at);
    out.values.push(p.value);
    out.low.push(p.low);
    out.high.push(p.high);
    out.energy.push(p.energy);
    before = p.at;
  }
  return out;
}
