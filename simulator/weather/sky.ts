import { pressureAtAltitude } from '../../src/domain/photovoltaics/irradiance/air-mass';
import { simplifiedSolis } from '../../src/domain/photovoltaics/irradiance/clear-sky';
import { dniExtra } from '../../src/domain/photovoltaics/irradiance/extraterrestrial';
import { solarPositionQuick } from '../../src/domain/photovoltaics/sun/position-quick';
import { dayOfYear } from '../../src/domain/photovoltaics/sun/time';
import { keyOf, mix, normal, smoothNoise, uniform } from '../chance';
import type { ClimatePlan } from '../plant/plan';
import { cloudAt, type CloudField } from './clouds';

export interface SkyPlace {
  key: string;
  latitude: number;
  longitude: number;
  altitude: number;
  climate: ClimatePlan;
}

/** The sky over a site at one moment. Angles in degrees, irradiance in W/m². */
export interface SkyNow {
  atS: number;
  zenith: number;
  elevation: number;
  azimuth: number;
  dniExtra: number;
  /** Without clouds. */
  dniClear: number;
  dhiClear: number;
  /** Share of the sky that clouds cover, 0 … 1. */
  cover: number;
  field: CloudField;
  temperatureAir: number;
  windSpeed: number;
}

const DAY_S = 86_400;

/**
 * Weather of a place, made up from a seed: each day is clear, mixed or overcast by the climate's shares; clouds
 * are a field that the wind carries across the roof. The state at a moment depends on that moment alone, so
 * any two runs agree however they step.
 */
export class Sky {
  private readonly key: number;
  private readonly pressure: number;
  private memo: SkyNow | null = null;

  constructor(
    private readonly place: SkyPlace,
    seed: number,
    /** Epoch seconds: with `fairToday`, the days about this moment are fair. */
    private readonly since: number,
  ) {
    this.key = mix(seed, keyOf(place.key));
    this.pressure = pressureAtAltitude(place.altitude);
  }

  /** Solar day of the place: whole days since 1970 at its longitude. */
  private day(atS: number): number {
    return Math.floor((atS + this.place.longitude * 240) / DAY_S);
  }

  /** 0 clear, 1 mixed, 2 overcast. */
  private dayType(day: number): 0 | 1 | 2 {
    const { climate } = this.place;
    const today = this.day(this.since);
    if (climate.fairToday && day === today) return 0;
    const u = uniform(this.key, day);
    return u < climate.clearShare ? 0 : u < 1 - climate.cloudyShare ? 1 : 2;
  }

  /** Rain washed the modules on that day. */
  private rained(day: number): boolean {
    return this.dayType(day) === 2 && uniform(this.key + 1, day) < 0.6;
  }

  /** Share of light lost to dust, 0 … 0.08, evenly over the site. */
  soiling(atS: number): number {
    const day = this.day(atS);
    let dry = 0;
    while (dry < 60 && !this.rained(day - dry - 1)) dry++;
    return Math.min(0.08, dry * this.place.climate.soilingPerDay);
  }

  private cover(atS: number): number {
    const shifted = (atS + this.place.longitude * 240) / DAY_S;
    const day = Math.floor(shifted);
    const mean = [0.07, 0.4, 0.92][this.dayType(day)] ?? 0.4;
    const next = [0.07, 0.4, 0.92][this.dayType(day + 1)] ?? 0.4;
    // The change of weather comes by night: between 20 and 4 o'clock of solar time.
    const hour = (shifted - day) * 24;
    const blend = hour < 20 ? 0 : (hour - 20) / 4;
    const swing = mean < 0.2 ? 0.06 : 0.18;
    const wander = swing * smoothNoise(this.key + 2, atS / 5400);
    return Math.max(0.01, Math.min(0.99, mean + (next - mean) * blend * 0.5 + wander));
  }

  /** @param atS epoch seconds */
  at(atS: number): SkyNow {
    if (this.memo?.atS === atS) return this.memo;
    const { place } = this;
    const ms = atS * 1000;
    const sun = solarPositionQuick(ms, place);
    const day = this.day(atS);
    const dayNumber = dayOfYear(ms);
    const extra = dniExtra(dayNumber);
    const { climate } = place;
    const clear = simplifiedSolis({
      apparentZenith: sun.apparentZenith,
      aod700: Math.max(0.02, Math.min(0.35, 0.1 + 0.045 * normal(this.key + 3, day))),
      precipitableWater: Math.max(0.3, Math.min(5, 1.6 + 0.5 * normal(this.key + 4, day))),
      pressure: this.pressure,
      dniExtra: extra,
    });
    const cover = this.cover(atS);
    const solarHour = (((atS + place.longitude * 240) % DAY_S) + DAY_S) / 3600;
    const season = Math.cos((2 * Math.PI * (dayNumber - (place.latitude < 0 ? 15 : 197))) / 365);
    const temperatureAir =
      climate.temperatureMean +
      climate.temperatureSeason * season +
      climate.temperatureDay * (1 - 0.5 * cover) * Math.cos((2 * Math.PI * (solarHour - 14.5)) / 24) +
      2 * smoothNoise(this.key + 5, atS / 130_000) +
      0.6 * smoothNoise(this.key + 6, atS / 1500);
    const gust =
      0.5 + 0.5 * smoothNoise(this.key + 7, atS / 9000) + 0.25 * smoothNoise(this.key + 8, atS / 90);
    const windSpeed = Math.max(0.2, climate.windMean * (0.45 + 1.1 * gust));
    const heading = 2 * Math.PI * uniform(this.key + 9, day);
    this.memo = {
      atS,
      zenith: sun.apparentZenith,
      elevation: sun.apparentElevation,
      azimuth: sun.azimuth,
      dniExtra: extra,
      dniClear: clear.dni,
      dhiClear: clear.dhi,
      cover,
      field: {
        key: this.key + 10,
        atS,
        cover,
        // Clouds travel in faster air than the roof feels.
        velocityX: Math.cos(heading) * (4 + 1.5 * climate.windMean),
        velocityY: Math.sin(heading) * (4 + 1.5 * climate.windMean),
      },
      temperatureAir,
      windSpeed,
    };
    return this.memo;
  }

  /** Share of the beam that comes through at a place on the roof (m), 0 … 1.05. */
  beamThrough(now: SkyNow, x: number, y: number): number {
    return now.dniClear <= 0 ? 0 : cloudAt(now.field, x, y);
  }
}
