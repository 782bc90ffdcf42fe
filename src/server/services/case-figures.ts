import type { CaseFigures, FiguresString, LightNow } from '../../domain/cases/figures';
import { STRINGS_WITH_UNITS } from '../../domain/cases/figures';
import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import { DARK_BELOW_ELEVATION, DIM_BELOW_ELEVATION } from '../../domain/verdicts/context';
import type { StringNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { casePlace, stringSums, type CasePlace, type StringSums } from '../queries/case-figures';
import { stringsNow } from '../queries/now';
import { sitesNow } from '../queries/sites-now';

function lightOf(place: CasePlace, at: Date): CaseFigures['light'] {
  const { apparentElevation } = solarPositionQuick(at.getTime(), place);
  const is: LightNow =
    apparentElevation < DARK_BELOW_ELEVATION
      ? 'dark'
      : apparentElevation < DIM_BELOW_ELEVATION
        ? 'dim'
        : 'light';
  return { is, elevation: Math.round(apparentElevation * 10) / 10, poaGlobal: place.poaGlobal };
}

function stringOf(s: StringNow, sums: StringSums | undefined, withUnits: boolean): FiguresString {
  return {
    id: s.id,
    name: s.name,
    shutdownOnly: s.kind === 'shutdown_only',
    optimizing: s.kind === 'optimizing',
    at: s.at,
    voltage: s.voltage,
    expectedVoltage: s.expectedVoltage,
    expectedBand: s.expectedBand,
    expectedInShutdown: s.expectedInShutdown,
    current: s.current,
    power: s.power,
    energyToday: sums?.energyToday ?? null,
    inForce: s.command && s.command.inForce !== 'released' ? s.command.inForce : null,
    dark: s.dark,
    finding: s.finding?.kind ?? null,
    units: s.counts.units,
    passing: s.counts.passing,
    shutdown: s.counts.shutdown,
    silent: s.counts.silent,
    unheard: s.counts.unheard,
    stuck: s.counts.stuck,
    notShuttingDown: s.counts.notShuttingDown,
    unconfirmed: s.counts.unconfirmed,
    output:
      sums?.outputDay && sums.outputRatio !== null ? { day: sums.outputDay, ratio: sums.outputRatio } : null,
    slots: withUnits
      ? s.slots.map((slot) => ({
          position: slot.position,
          serial: slot.serial,
          state: slot.state,
          verdict: slot.verdict,
          voltage: slot.voltage,
          voltageIn: slot.voltageIn,
          expected: slot.expected,
          assumed: slot.assumed,
        }))
      : [],
  };
}

/**
 * The figures of this minute, as a case keeps them: light, the site's power and energy, every string, and the units of
 * the strings that the case is about. Whoever calls has checked that the site may be seen.
 * @throws AppError not_found
 */
export async function gatherCaseFigures(
  tx: Tx,
  at: Date,
  about: { siteId: number; stringRefs: readonly string[] },
): Promise<CaseFigures> {
  const place = found(await casePlace(tx, about.siteId, at), 'site');
  const [site] = await sitesNow(tx, at, [about.siteId]);
  const sums = new Map((await stringSums(tx, about.siteId, at)).map((s) => [s.ref, s]));
  const wanted = new Set(about.stringRefs.slice(0, STRINGS_WITH_UNITS));
  const strings = await stringsNow(tx, at, { siteId: about.siteId });
  return {
    at: at.toISOString(),
    light: lightOf(place, at),
    site: {
      power: site?.power ?? null,
      energyToday: place.energyToday,
      reportedAt: site?.reportedAt ?? null,
    },
    strings: strings.map((s) => stringOf(s, sums.get(s.id), wanted.has(s.id))),
  };
}
