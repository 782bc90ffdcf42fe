import { aboutTheLine, conductorsOhm, loopSamples } from '../../domain/output/loop-samples';
import {
  fitLoop,
  judgeLoop,
  type LoopFinding,
  type LoopFit,
  type LoopSample,
} from '../../domain/output/resistance';
import { localDay } from '../../drawings/times';
import type { StringLoop } from '../../schemas/api/workbench';
import type { Tx } from '../db/transaction';
import { pastFits } from '../queries/loop-fits';
import { loopReading, loopRows } from '../queries/output-series';
import { siblingsOf, stringFacts, stringsOnInput, type StringFacts } from '../queries/string-facts';
import { newestLoopFits } from '../queries/string-units';
import { dayBounds } from '../queries/string-history';
import { noSuchString } from './string-axis';
import { loopWords } from '../../words/refusals-history';

/** Days that a fit rests on. */
const DAYS = 3;
const POINTS_MOST = 700;
export interface LoopRead {
  samples: LoopSample[];
  fit: LoopFit | string;
  finding: LoopFinding;
  fromDay: string;
  day: string;
  strings: number;
}

/** The loop of a string over the three days that end with a day, fitted and judged as the night does. */
export async function loopOf(
  tx: Tx,
  facts: StringFacts,
  on: string | undefined,
  now: Date,
): Promise<LoopRead> {
  const span = await dayBounds(tx, on ?? null, now, facts.timeZone, DAYS);
  const fromDay = localDay(span.from, facts.timeZone);
  const day = localDay(new Date(span.to.getTime() - 1), facts.timeZone);
  const onInput = await stringsOnInput(tx, facts.inputId);
  const told = facts.measures === 'output' || facts.measures === 'both';
  const rows = told ? await loopRows(tx, onInput, span, facts.reportIntervalS / 2) : [];
  const of = (id: number) => rows.filter((r) => r.stringId === id).map(loopReading);
  const samples = loopSamples(of(facts.id), onInput.filter((id) => id !== facts.id).map(of), facts.slots);
  const fit = told ? fitLoop(samples) : loopWords.noOutput;
  const siblings = await siblingsOf(tx, facts);
  const past = (await pastFits(tx, facts.siteId, fromDay)).find((p) => p.stringId === facts.id)?.fit ?? null;
  const finding = judgeLoop(fit, {
    past,
    siblings: (
      await newestLoopFits(
        tx,
        siblings.map((s) => s.id),
        day,
      )
    ).map((f) => ({ ohm: f.ohm, cableOhm: conductorsOhm(f.cableOhm, f.slots) })),
    cableOhm: conductorsOhm(facts.cableOhm, facts.slots),
  });
  return { samples, fit, finding, fromDay, day, strings: onInput.length };
}

/** An even choice of so many. */
function thinned<T>(list: readonly T[], most: number): T[] {
  if (list.length <= most) return [...list];
  const every = list.length / most;
  return Array.from({ length: most }, (_, i) => list[Math.floor(i * every)]).filter((x) => x !== undefined);
}

/**
 * Sum of the units against the input, over current: the points, the fitted line, and what it says.
 * @throws AppError not_found
 */
export async function readLoop(
  tx: Tx,
  ref: string,
  query: { on?: string | undefined },
  now: Date,
): Promise<StringLoop> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const { samples, fit, finding, fromDay, day, strings } = await loopOf(tx, facts, query.on, now);
  const line = typeof fit === 'string' ? null : fit;
  const about = aboutTheLine(samples, line);
  return {
    fromDay,
    day,
    timeZone: facts.timeZone,
    points: thinned(about.points, POINTS_MOST),
    fit: line && { ...line, interceptV: about.interceptV },
    why: typeof fit === 'string' ? fit : '',
    cableOhm: facts.cableOhm,
    outcome: finding.outcome,
    words: finding.words,
    couldBe: finding.couldBe,
    threshold: finding.threshold,
    strings,
  };
}
