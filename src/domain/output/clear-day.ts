import { clearSkyInPlane } from '../photovoltaics/irradiance/clear-sky-plane';

/** What a site would give under a clear sky, scaled to what it has shown that it can. */

export interface ArrayAtPlace {
  latitude: number;
  longitude: number;
  /** m */
  altitude: number;
  /** W, what the inverters can give together. */
  acPowerMax: number;
  planes: {
    /** Degrees. */
    surfaceTilt: number;
    surfaceAzimuth: number;
    /** 0 … 1 */
    albedo: number;
    /** W at STC, sum of the plane's modules. */
    pmpRef: number;
  }[];
}
export interface QuarterPower {
  /** ms since 1970-01-01T00:00Z, start of the 15 minutes. */
  atMs: number;
  /** W, mean over the 15 minutes. */
  power: number;
}

export const QUARTER_MS = 15 * 60_000;
/** AC out of nameplate DC without history: 14 % of system losses and 96 % inverter efficiency, the defaults of PVWatts 5 (NREL/TP-6A20-62641). */
export const DATASHEET_SCALE = 0.86 * 0.96;
/** Quarters needed before a site's own best counts; from experience. */
const QUARTERS_MIN = 24;
/** Only quarters with so much of the nameplate's clear-sky power are compared: near the horizon the model is poor. */
const COMPARED_FROM = 0.3;
/** The site's own best is this quantile of its quarters: above it lie reflections from cloud edges. */
const BEST_QUANTILE = 0.95;

/** W of DC that the nameplate promises under a clear sky at the middle of the quarter, module temperature left out. */
function nameplatePower(atMs: number, array: ArrayAtPlace): number {
  return array.planes.reduce((sum, plane) => {
    const { poaGlobal } = clearSkyInPlane(atMs + QUARTER_MS / 2, { ...array, ...plane });
    return sum + (plane.pmpRef * poaGlobal) / 1000;
  }, 0);
}

/**
 * AC power over nameplate clear-sky power on the site's best quarters, or null where there are too few to say.
 * Quarters at the inverters' limit are left out: they say nothing of the sky.
 *
 * @throws RangeError naming the parameter of the place that is out of range
 */
export function ownBestScale(history: readonly QuarterPower[], array: ArrayAtPlace): number | null {
  const pmpRef = array.planes.reduce((sum, p) => sum + p.pmpRef, 0);
  const ratios: number[] = [];
  for (const { atMs, power } of history) {
    if (power <= 0 || power > array.acPowerMax * 0.98) continue;
    const clear = nameplatePower(atMs, array);
    if (clear > pmpRef * COMPARED_FROM) ratios.push(power / clear);
  }
  if (ratios.length < QUARTERS_MIN) return null;
  ratios.sort((a, b) => a - b);
  return ratios[Math.floor((ratios.length - 1) * BEST_QUANTILE)] ?? null;
}

/** The quarters from `fromMs` up to `toMs` under a clear sky, W of AC, cut at the inverters' limit. */
export function clearDay(fromMs: number, toMs: number, array: ArrayAtPlace, scale: number): QuarterPower[] {
  const out: QuarterPower[] = [];
  for (let atMs = fromMs; atMs < toMs; atMs += QUARTER_MS)
    out.push({ atMs, power: Math.min(array.acPowerMax, scale * nameplatePower(atMs, array)) });
  return out;
}
