import { priceOn } from '../../domain/output/tariff';
import { localDay } from '../../drawings/times';
import type { LowOutput, LowString } from '../../schemas/api/low-output-rows';
import type { Tx } from '../db/transaction';
import { currencyOf } from '../queries/causes-list';
import { tariffsByRef } from '../queries/figures';
import { openCasesByString } from '../queries/low-output';
import { lowOutputStrings, nightCounts, type JudgedString } from '../queries/output-days';

/** A string whose newest judged day is older says nothing of now. */
const JUDGED_WITHIN_MS = 14 * 86_400_000;

function rowOf(s: JudgedString, price: number | null, openCase: LowString['openCase']): LowString {
  const { finding } = s;
  const days = Math.max(1, finding.days.length);
  const daily = (kWh: number | undefined): number | null => (kWh === undefined ? null : kWh / days);
  const lossKWhDay = daily(finding.lossKWh?.value);
  const firstLow = finding.days.find((d) => d.low)?.day ?? s.day;
  const caused = s.cause ? localDay(s.cause.since, s.timeZone) : null;
  return {
    site: { id: s.siteRef, name: s.siteName, timeZone: s.timeZone },
    string: { id: s.stringRef, name: s.stringName },
    plane: s.plane,
    day: s.day,
    since: caused !== null && caused < firstLow ? caused : firstLow,
    share: finding.loss?.share ?? null,
    lossKWhDay,
    lossKWhDayLow: daily(finding.lossKWh?.low),
    lossKWhDayHigh: daily(finding.lossKWh?.high),
    moneyDay: price === null || lossKWhDay === null ? null : lossKWhDay * price,
    lossKWh: s.cause ? s.cause.lossWh / 1000 : null,
    signature: finding.signature?.kind ?? 'unclear',
    words: finding.signature?.words ?? finding.words,
    method: finding.method,
    scope: finding.scope,
    confidence: Math.min(finding.confidence, finding.signature?.confidence ?? 1),
    cause: s.cause?.ref ?? null,
    openCase,
  };
}

/** The strings that are low now over every site of the actor, with what each is worth and what is done about it. */
export async function readLowOutput(tx: Tx, at: Date): Promise<LowOutput> {
  const judgedSince = new Date(at.getTime() - JUDGED_WITHIN_MS).toISOString().slice(0, 10);
  const low = await lowOutputStrings(tx, { judgedSince });
  const tariffs = await tariffsByRef(tx, [...new Set(low.map((s) => s.siteRef))]);
  const cases = await openCasesByString(
    tx,
    low.map((s) => s.stringRef),
  );
  return {
    at: at.toISOString(),
    currency: await currencyOf(tx),
    rows: low.map((s) =>
      rowOf(s, priceOn(s.day, tariffs.get(s.siteRef) ?? []), cases.get(s.stringRef) ?? null),
    ),
    ...(await nightCounts(tx, judgedSince)),
  };
}
