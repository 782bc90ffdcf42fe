import { median } from '../../domain/output/robust';
import type { StringNow } from '../../schemas/api/now';
import type { StringPage } from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { stringsNow } from '../queries/now';
import { planeWords } from '../../domain/output/plane-words';
import { openCaseOf, stringNames } from '../queries/string-facts';
import { dayBounds, energyAgainst, eventsOfString } from '../queries/string-history';
import { knownString, noSuchString, type KnownString } from './string-axis';
import { stringPageWords } from '../../words/refusals-history';

const EVENT_DAYS = 14;
/** Under this share of what the siblings made, a string is not called short. */
const LOSS_FROM = 0.03;
const REPORTS_MIN = 10;

/**
 * What the string has not made today against the median of its siblings, from when its oldest standing trouble began;
 * null where nothing stands, or too little is known to say.
 */
async function lostToday(
  tx: Tx,
  { facts, siblings }: KnownString,
  string: StringNow,
  at: Date,
): Promise<StringPage['lostToday']> {
  const since = string.slots
    .filter((s) => s.verdict === 'stuck' && s.since !== null)
    .map((s) => s.since ?? '');
  if (facts.kind === 'shutdown_only' || since.length === 0) return null;
  const today = await dayBounds(tx, null, at, facts.timeZone, 1);
  const from = new Date(Math.max(today.from.getTime(), Math.min(...since.map((s) => new Date(s).getTime()))));
  const rows = await energyAgainst(
    tx,
    facts.id,
    siblings.map((s) => s.id),
    { from, to: at },
  );
  const own = rows.find((r) => r.stringId === facts.id);
  const others = siblings.flatMap((s) => {
    const row = rows.find((r) => r.stringId === s.id);
    return row && row.reports >= REPORTS_MIN ? [row.wh / s.units] : [];
  });
  if (!own || own.reports < REPORTS_MIN || others.length < 2) return null;
  const due = median(others) * facts.units;
  const wh = due - own.wh;
  return wh > due * LOSS_FROM
    ? { wh, since: from.toISOString(), against: stringPageWords.others(planeWords(facts.planeName)) }
    : null;
}

/**
 * Everything that the page of a string shows now.
 * @throws AppError not_found alike for what does not exist and what is another organisation's
 */
export const readString = async (tx: Tx, ref: string, at: Date): Promise<StringPage> =>
  readKnownString(tx, await knownString(tx, ref), at);

/** The same of a string that was found. @throws AppError not_found: it is gone since */
export async function readKnownString(tx: Tx, known: KnownString, at: Date): Promise<StringPage> {
  const { facts, siblings } = known;
  const [string] = await stringsNow(tx, at, { siteId: facts.siteId, stringIds: [facts.id] });
  if (!string) throw noSuchString();
  const names = await stringNames(tx, facts.siteId);
  const nth = names.findIndex((n) => n.id === facts.ref);
  const units = Object.entries(facts.evidence?.units ?? {}).map(([position, e]) => ({
    position: Number(position),
    basis: e.basis,
    thresholdSource: e.thresholdSource,
    confidence: e.confidence,
    couldBe: e.couldBe,
  }));
  return {
    at: at.toISOString(),
    site: { id: facts.siteRef, name: facts.siteName, timeZone: facts.timeZone, stage: facts.stage },
    string,
    plane: {
      name: facts.planeName,
      surfaceTilt: facts.surfaceTilt,
      surfaceAzimuth: facts.surfaceAzimuth,
    },
    unitType: {
      name: facts.unitTypeName,
      measures: facts.measures,
      insulationTestMax: facts.insulationTestMax,
    },
    moduleType: facts.module.name,
    light: { poaGlobal: facts.poaGlobal, temperatureModule: facts.temperatureModule },
    evidence: { units, finding: facts.evidence?.finding ?? null },
    lostToday: await lostToday(tx, known, string, at),
    neighbours: { previous: names[nth - 1] ?? null, next: names[nth + 1] ?? null },
    events: await eventsOfString(
      tx,
      facts,
      { from: new Date(at.getTime() - EVENT_DAYS * 86_400_000), to: new Date(at.getTime() + 60_000) },
      40,
    ),
    siblings: siblings.map((s) => ({ id: s.ref, name: s.name })),
    openCase: await openCaseOf(tx, facts),
  };
}
