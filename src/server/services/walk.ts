import { ORDINARY_METER, type Conditions, type ReadingLight } from '../../domain/readings/reading';
import { walkReadings } from '../../domain/commissioning/walk-readings';
import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import { DARK_BELOW_ELEVATION, DIM_BELOW_ELEVATION } from '../../domain/verdicts/context';
import type { StringNow } from '../../schemas/api/now';
import type { WalkPage, WalkRoofString } from '../../schemas/api/walk';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { stringsNow } from '../queries/now';
import { visibleSite } from '../queries/visible-site';
import {
  answeredSerials,
  walkSite,
  walkStrings,
  type WalkSiteFacts,
  type WalkStringRow,
} from '../queries/walk';
import { walkLights } from '../../words/refusals-as-built';

const LIGHT_WORDS: Record<ReadingLight, string> = {
  bright: walkLights.bright,
  dull: walkLights.dull,
  snow: walkLights.snow,
  night: walkLights.night,
};
/** W/m² in the plane from which light is called bright. */
const BRIGHT_FROM = 350;

function lightOf(facts: WalkSiteFacts, strings: readonly WalkStringRow[], at: Date): ReadingLight {
  const { apparentElevation } = solarPositionQuick(at.getTime(), facts);
  if (apparentElevation < DARK_BELOW_ELEVATION) return 'night';
  const measured = strings.flatMap((s) => (s.poaGlobal === null ? [] : [s.poaGlobal]));
  const best = measured.length > 0 ? Math.max(...measured) : null;
  if (best !== null) return best >= BRIGHT_FROM ? 'bright' : 'dull';
  return apparentElevation < DIM_BELOW_ELEVATION + 10 ? 'dull' : 'bright';
}

/** A sensor speaks for its own plane; its module's back is a little cooler than the cells (Sandia: about 3 K at 1000 W/m²). */
function conditionsOf(row: WalkStringRow): Conditions | null {
  if (row.poaGlobal === null || row.poaGlobal < 20 || row.temperatureModule === null) return null;
  return {
    poaGlobal: row.poaGlobal,
    poaRelativeSd: 0.1,
    temperatureCell: row.temperatureModule + (3 * row.poaGlobal) / 1000,
    temperatureSd: 4,
  };
}

function roofString(row: WalkStringRow, now: StringNow | undefined, light: ReadingLight): WalkRoofString {
  const inForce = now?.command?.inForce;
  return {
    stringId: row.ref,
    plane: row.plane,
    x: row.x,
    y: row.y,
    unitType: row.unitTypeName,
    moduleType: row.module.name,
    connectors: { module: row.moduleConnector, unitIn: row.unitIn, unitOut: row.unitOut },
    readings: walkReadings({
      units: Math.max(1, row.x.length),
      unitType: row.unitType,
      module: row.module,
      commanded: inForce === undefined ? 'unknown' : inForce === 'released' ? 'released' : 'shutdown',
      heard: row.heard,
      light,
      conditions: light === 'night' ? null : conditionsOf(row),
      meter: ORDINARY_METER,
    }),
  };
}

/**
 * The roof of a site with its exceptions, as it stands.
 * @throws AppError not_found
 */
export async function walkPage(tx: Tx, siteRef: string, at: Date): Promise<WalkPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const facts = await walkSite(tx, site.id);
  const strings = await stringsNow(tx, at, { siteId: site.id });
  const rows = await walkStrings(tx, site.id, at);
  const light = lightOf(facts, rows, at);
  const byId = new Map(strings.map((s) => [s.id, s]));
  return {
    at: at.toISOString(),
    site: {
      id: site.ref,
      name: site.name,
      place: site.place,
      timeZone: site.timeZone,
      stage: site.stage,
      contactName: facts.contactName,
      contactPhone: facts.contactPhone,
      shutdownSwitchPlace: facts.shutdownSwitchPlace,
    },
    outline: facts.outline,
    strings,
    roof: rows.map((row) => roofString(row, byId.get(row.ref), light)),
    answered: await answeredSerials(tx, site.id),
    rollCalled: facts.rollCalled,
    light: LIGHT_WORDS[light],
  };
}
