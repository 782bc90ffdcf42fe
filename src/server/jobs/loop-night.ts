import { setImmediate as turn } from 'node:timers/promises';
import { groupedBy } from '../../domain/grouped-by';
import type { FoundCause } from '../../domain/causes/changes';
import { conductorsOhm, loopSamples } from '../../domain/output/loop-samples';
import { median } from '../../domain/output/robust';
import {
  fitLoop,
  judgeLoop,
  type LoopFinding,
  type LoopComparison,
  type LoopFit,
  type LoopSample,
} from '../../domain/output/resistance';
import type { PlaneReference } from '../../domain/output/plane-reference';
import { asIngest } from '../db/transaction';
import { pastFits, type LoopFitRow } from '../queries/loop-fits';
import { loopReading, loopRows, type LoopRow, type OutputString } from '../queries/output-series';
import { loopFitSaid } from '../../words/domain-loop';
import { loopCause } from './night-findings';
import type { NightSeries, NightString, SeriesSite } from './plane-series';

/** Resistance of every string's loop, fitted over the last three sunny days when a sunny day ends. */

/** Hours of full sun, by what the strings should have made, that make a sunny day. */
const SUNNY_H = 2.2;
const SUNNY_DAYS = 3;
const STRINGS_A_READ = 40;

export interface LoopJudged {
  stringRef: string;
  outcome: LoopFinding['outcome'];
  row: LoopFitRow | null;
  cause: ((siteRef: string) => FoundCause) | null;
}

export async function fitLoops(
  site: SeriesSite,
  series: NightSeries,
  planes: readonly { reference: PlaneReference; index: number; members: readonly OutputString[] }[],
  excessOhm: number,
): Promise<LoopJudged[]> {
  const last = series.days.length - 1;
  const sunny = series.days.map((_, d) => {
    const hours = planes.flatMap((p) => {
      const power = p.members.reduce((sum, m) => sum + m.powerRef, 0);
      const wh = p.reference.expectedWh[p.index]?.[d] ?? 0;
      return power > 0 && wh > 0 ? [wh / power] : [];
    });
    return hours.length > 0 && median(hours) >= SUNNY_H;
  });
  const three = sunny.flatMap((yes, d) => (yes ? [d] : [])).slice(-SUNNY_DAYS);
  const first = three[0];
  const loops = series.strings.filter((n) => n.string.measures === 'output' || n.string.measures === 'both');
  if (loops.length < 1 || first === undefined || three.length < SUNNY_DAYS || !sunny[last]) return [];
  const samples = await readSamples(site, series, loops, first);
  const fits = new Map<number, LoopFit | string>();
  for (const n of loops) {
    fits.set(n.string.id, fitLoop(samples.get(n.string.id) ?? []));
    await turn(); // pages and loggers are served by the same process
  }
  const fromDay = series.days[first] ?? '';
  const pasts = new Map(
    (await asIngest((tx) => pastFits(tx, site.id, fromDay))).map((p) => [p.stringId, p.fit]),
  );
  const days = last - first + 1;
  return loops.map(({ string }): LoopJudged => {
    const fit = fits.get(string.id) ?? loopFitSaid.noSamples;
    const past = pasts.get(string.id) ?? null;
    const like = loops.filter((o) => o.string.id !== string.id && o.string.unitTypeId === string.unitTypeId);
    const known = like.flatMap((o): [LoopFit, OutputString][] => {
      const f = fits.get(o.string.id);
      return f === undefined || typeof f === 'string' ? [] : [[f, o.string]];
    });
    const against: LoopComparison = {
      past,
      siblings: known.map(([f, s]) => ({ ohm: f.ohm, cableOhm: conductorsOhm(s.cableOhm, s.slots) })),
      siblingsGrowthOhm: known.flatMap(([f, s]) => {
        const before = pasts.get(s.id);
        return before ? [f.ohm - before.ohm] : [];
      }),
      cableOhm: conductorsOhm(string.cableOhm, string.slots),
    };
    const finding = judgeLoop(fit, against, excessOhm);
    const found = finding.outcome === 'excess' || finding.outcome === 'growing';
    const ohm = finding.above?.ohm ?? 0;
    const lossWhDay =
      ((samples.get(string.id) ?? []).reduce((sum, s) => sum + s.ownA ** 2, 0) * ohm * 300) / 3600 / days;
    return {
      stringRef: string.ref,
      outcome: finding.outcome,
      row:
        typeof fit === 'string'
          ? null
          : { stringId: string.id, fromDay, day: series.days[last] ?? '', fit, finding },
      cause: found
        ? (siteRef) => loopCause(siteRef, string, finding, series.boundsS[first] ?? 0, lossWhDay)
        : null,
    };
  });
}

/** Reports of the loops from day `first` on, with what the other strings of the input carried at that moment. */
async function readSamples(
  site: SeriesSite,
  series: NightSeries,
  loops: readonly NightString[],
  first: number,
): Promise<Map<number, LoopSample[]>> {
  const span = {
    from: new Date((series.boundsS[first] ?? 0) * 1000),
    to: new Date((series.boundsS.at(-1) ?? 0) * 1000),
  };
  const samples = new Map<number, LoopSample[]>();
  // strings of one input are read together: each needs the others' currents
  const byInput = groupedBy(series.strings, (n) => n.string.inputId);
  const wanted = [...byInput.values()].filter((group) => group.some((n) => loops.includes(n)));
  for (let i = 0; i < wanted.length;) {
    const some: NightString[] = [];
    while (i < wanted.length && some.length < STRINGS_A_READ) some.push(...(wanted[i++] ?? []));
    const rows = await asIngest((tx) =>
      loopRows(
        tx,
        some.map((n) => n.string.id),
        span,
        site.reportIntervalS / 2,
      ),
    );
    const byString = groupedBy(rows, (r) => r.stringId);
    for (const n of some) {
      const others = (byInput.get(n.string.inputId) ?? []).filter((o) => o !== n);
      samples.set(
        n.string.id,
        samplesOf(
          n,
          byString.get(n.string.id) ?? [],
          others.map((o) => byString.get(o.string.id) ?? []),
          series,
        ),
      );
      await turn();
    }
  }
  return samples;
}

/** A string's samples outside the quarters that an inverter limited; what flowed beside is told by all reports. */
function samplesOf(
  n: NightString,
  rows: readonly LoopRow[],
  others: readonly (readonly LoopRow[])[],
  series: NightSeries,
): LoopSample[] {
  const quarterOf = (atS: number): number => Math.floor((atS - (series.boundsS[0] ?? 0)) / 900);
  return loopSamples(
    rows.filter((row) => n.excluded[quarterOf(row.atS)] === 0).map(loopReading),
    others.map((list) => list.map(loopReading)),
    n.string.slots,
  );
}
