import { mix, uniform } from '../../../simulator/chance';
import type { Fault } from '../../../simulator/faults/kinds';
import type { SitePlan } from '../../../simulator/plant/plan';
import { SitePlant } from '../../../simulator/plant/site-plant';
import {
  MODULE_TYPES,
  MONO_430,
  MONO_450,
  POLY_285,
  UNIT_TYPES,
} from '../../../simulator/scenarios/catalogue';
import { layOut } from '../../../simulator/scenarios/lay-out';
import { PLACES } from '../../../simulator/scenarios/places';

/** Plants that the bench draws: latitudes, seasons, skies, sizes. Everything follows from a number. */

export const DAY_S = 86_400;
const FIRST_DAY_S = Date.UTC(2025, 0, 1) / 1000;
const SEED = 20_260_117;
const LATITUDES = [3, 14, 21, 28, 34, 40, 45, 50, 54, 58, -8, -18, -25, -31, -37, -43];
const MODULES = [MONO_450, MONO_430, POLY_285];

/** Draws of one plant: the same number gives the same plant. */
export class Draw {
  private readonly key: number;
  private taken = 0;
  constructor(n: number) {
    this.key = mix(SEED, n);
  }
  /** Uniform in [0, 1). */
  next(): number {
    return uniform(this.key, this.taken++);
  }
  /** Whole number in [from, to]. */
  whole(from: number, to: number): number {
    return from + Math.floor(this.next() * (to - from + 1));
  }
  oneOf<T>(list: readonly T[]): T {
    return list[this.whole(0, list.length - 1)]!;
  }
  /** Some of a list, no element twice. */
  some<T>(list: readonly T[], count: number): T[] {
    const left = [...list];
    return Array.from(
      { length: Math.min(count, list.length) },
      () => left.splice(this.whole(0, left.length - 1), 1)[0]!,
    );
  }
}

export interface PlantSpec {
  n: number;
  unitType: string;
  strings: number;
  /** Units in the shortest and in the longest string. */
  units: [number, number];
  perInput: number;
  reportIntervalS: number;
  /** Two zones, each with its own initiator and transmitter; otherwise one. */
  twoZones: boolean;
  gateways: number;
  obstacle: boolean;
  /** So many days of the plant are looked at. */
  days: number;
  /** Midwinter where it freezes. */
  frost?: boolean;
}

/** First number of each set of plants: the judgements were developed on one and are held against the other. */
export const SEED_SETS = { developed: 0, held_out: 50_400 } as const;

export interface DrawnPlant {
  plan: SitePlan;
  /** Epoch seconds of the solar midnight before the first day. */
  fromS: number;
  seed: number;
}

/** Draws a site on paper; `draw` decides where, when, under what sky and of which modules. */
export function drawPlant(spec: PlantSpec, draw: Draw): DrawnPlant {
  const latitude = spec.frost ? draw.whole(40, 46) : draw.oneOf(LATITUDES) + 2 * draw.next();
  const place = draw.oneOf(
    PLACES.filter((p) => Math.abs(Math.abs(p.latitude) - Math.abs(latitude)) < 16).length > 0
      ? PLACES.filter((p) => Math.abs(Math.abs(p.latitude) - Math.abs(latitude)) < 16)
      : PLACES,
  );
  const north = Math.abs(latitude) > 40;
  const clouds = draw.next();
  const zones = spec.twoZones ? ['Zone 1', 'Zone 2'] : ['Zone 1'];
  const perZone = spec.twoZones
    ? [Math.ceil(spec.strings / 2), Math.floor(spec.strings / 2)]
    : [spec.strings];
  const gatewayNames = Array.from({ length: spec.gateways }, (_, i) => `Gateway ${i + 1}`);
  const tilt = draw.whole(8, 35);
  const plan = layOut(
    {
      name: `Bench plant ${spec.n}`,
      switchedOnOn: '2024-05-02',
      shutdownSwitchPlace: 'At the entrance',
      contactName: 'Nobody',
      contactPhone: '+00 555 0000',
      reportIntervalS: spec.reportIntervalS,
      moduleType: draw.oneOf(MODULES),
      unitType: spec.unitType,
      planes: [{ name: 'Roof', surfaceTilt: tilt, surfaceAzimuth: 180 + draw.whole(-70, 70), albedo: 0.2 }],
      initiators: zones.map((z) => ({ name: `Initiator of ${z}`, place: 'At the entrance' })),
      zones: zones.map((z) => ({ name: z, initiator: `Initiator of ${z}` })),
      transmitters: zones.map((z, i) => ({ name: `T${i + 1}`, zone: z })),
      gatewayNames,
      blocks: zones.map((zone, z) => ({
        name: 'AB'[z]!,
        strings: perZone[z]!,
        units: stringLengths(spec, draw, perZone[z]!),
        plane: 'Roof',
        zone,
        gateways: Array.from({ length: perZone[z]! }, (_, s) => 1 + ((s + z) % spec.gateways)),
        perInput: spec.perInput,
        transmitters: [`T${z + 1}`],
      })),
      oversizing: 1.05 + 0.25 * draw.next(),
      climate: {
        clearShare: 0.2 + 0.6 * clouds,
        cloudyShare: 0.35 * (1 - clouds),
        fairToday: false,
        windMean: 2 + 3 * draw.next(),
      },
      obstacles: spec.obstacle
        ? [{ name: 'Chimney', x: 8 + 10 * draw.next(), y: -1.5, height: 1.6, radius: 0.4 }]
        : [],
    },
    {
      ...place,
      latitude,
      longitude: place.longitude,
      temperature: north ? [9, 9, 5] : place.temperature,
    },
    { modules: MODULE_TYPES, units: UNIT_TYPES },
  );
  // so far north that a midwinter day is no day to judge by: March to October there
  const day = spec.frost
    ? draw.oneOf([draw.whole(0, 45), draw.whole(340, 360)])
    : Math.abs(latitude) > 48
      ? midyear(draw, latitude)
      : draw.whole(0, 364 - spec.days);
  const fromS = FIRST_DAY_S + day * DAY_S - Math.round(plan.longitude * 240);
  return { plan, fromS, seed: mix(SEED, spec.n) };
}

const midyear = (draw: Draw, latitude: number): number =>
  latitude > 0 ? draw.whole(70, 270) : draw.oneOf([draw.whole(0, 80), draw.whole(270, 340)]);

/** Strings on one input are of one length, as they must be. */
function stringLengths(spec: PlantSpec, draw: Draw, strings: number): number[] {
  const [low, high] = spec.units;
  let length = low;
  return Array.from({ length: strings }, (_, s) => {
    if (s % spec.perInput === 0) length = draw.whole(low, high);
    return length;
  });
}

export interface TimedFault {
  fault: Fault;
  fromS: number;
  toS: number | null;
}

/** Builds the plant, with faults or sound, at `atS`. */
export function build(drawn: DrawnPlant, faults: readonly TimedFault[], atS: number): SitePlant {
  const plant = new SitePlant(
    drawn.plan,
    { modules: MODULE_TYPES, units: UNIT_TYPES },
    drawn.seed,
    drawn.fromS,
    atS,
  );
  for (const f of faults) plant.faults.add(f.fault, f.fromS, f.toS);
  return plant;
}

export const unitTypeOf = (plan: SitePlan) => UNIT_TYPES.find((t) => t.name === plan.strings[0]!.unitType)!;
export const moduleTypeOf = (plan: SitePlan) =>
  MODULE_TYPES.find((m) => m.name === plan.strings[0]!.slots[0]!.moduleType)!;
