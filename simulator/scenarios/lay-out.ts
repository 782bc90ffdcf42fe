import { inverterSheetOf } from '../../src/domain/equipment/inverter-type';
import { starterEquipment } from '../../src/domain/equipment/starter';
import type { UnitType } from '../../src/domain/equipment/unit-type';
import type { ModuleType } from '../../src/domain/equipment/module-type';
import { keyOf, mix } from '../chance';
import {
  typeNamed,
  type ClimatePlan,
  type ObstaclePlan,
  type SitePlan,
  type SlotPlan,
  type StringPlan,
} from '../plant/plan';
import type { Place } from './places';

/** Strings of one kind on one plane, served alike. */
export interface Block {
  /** Letter before the number in the strings' names: A1, A2 … */
  name: string;
  strings: number;
  /** Units in each string, or one figure a string. */
  units: number | number[];
  plane: string;
  zone: string;
  /** Gateway number of each string, repeated as need be; one figure serves all. */
  gateways: number | number[];
  /** Strings that share one input. */
  perInput?: number;
  transmitters?: string[];
  homeRunLeavesArray?: boolean;
}

export interface SiteSpec {
  name: string;
  stage?: SitePlan['stage'];
  ruleSet?: SitePlan['ruleSet'];
  structure?: SitePlan['structure'];
  switchedOnOn: string | null;
  shutdownSwitchPlace: string;
  contactName: string;
  contactPhone: string;
  reportIntervalS?: number;
  moduleType: string;
  unitType: string;
  planes: SitePlan['planes'];
  initiators: SitePlan['initiators'];
  zones: SitePlan['zones'];
  transmitters?: SitePlan['transmitters'];
  gatewayNames: string[];
  blocks: Block[];
  /** Inputs of one inverter. */
  inputsPerInverter?: number;
  /** Module power at STC over AC power. */
  oversizing?: number;
  climate?: Partial<ClimatePlan>;
  obstacles?: ObstaclePlan[];
  strangers?: {
    gateway: number;
    /** Where it really sits; `misread`: its label was copied wrongly, else another unit was put there than drawn. */
    seat?: { string: string; position: number; misread: boolean };
  }[];
  faults?: SitePlan['faults'];
  openInitiators?: SitePlan['openInitiators'];
}

const MODULE_WIDTH = 1.12; // m
const MODULE_DEPTH = 1.78; // m
const ROW_GAP = 0.35; // m
const IN_A_ROW = 30;

const slug = (name: string) =>
  name
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '');

/** Sixteen characters that look like a label on a unit, and are no other unit's. */
function serialOf(batch: string, n: number, key: number): string {
  const body = (n * 0x9e5 + (key & 0xfff)) & 0xffff;
  const check = mix(key, n) & 0xff;
  return `${batch}-${hex(body, 4)}-${hex(check, 2)}`;
}
/** The label as it is where the drawing has a copy of it with one character taken for another. */
function misread(serial: string): string {
  const alike: Record<string, string> = {
    '8': 'B',
    B: '8',
    '0': 'D',
    D: '0',
    '1': '7',
    '7': '1',
    '5': '6',
    '6': '5',
  };
  const at = [...serial].findLastIndex((c) => c in alike);
  if (at < 0) return `${serial.slice(0, -1)}${serial.endsWith('3') ? '9' : '3'}`;
  return serial.slice(0, at) + (alike[serial[at] ?? ''] ?? '') + serial.slice(at + 1);
}
const hex = (n: number, digits: number) => n.toString(16).toUpperCase().padStart(digits, '0');

const ordinal = (n: number): string => {
  const tail = n % 100 > 10 && n % 100 < 14 ? 'th' : (['th', 'st', 'nd', 'rd'][n % 10] ?? 'th');
  return `${n}${tail}`;
};

/** K by which a place's coldest and hottest hours lie beyond its usual ones. */
const COLD_SPELL = 6;
const HEAT_WAVE = 5;

/** The smallest inverter type of the starter set that takes a string's cold voltage, the inputs and the power. */
function inverterTypeFor(need: { acPowerMax: number; inputs: number; voltage: number }): string {
  const types = starterEquipment().inverters.map(inverterSheetOf);
  const fits = types.filter(
    (t) => t.inputs >= need.inputs && t.acPowerMax >= need.acPowerMax && t.voltageMax >= 1.1 * need.voltage,
  );
  const found = (fits.length > 0 ? fits : types).sort((a, b) =>
    fits.length > 0 ? a.acPowerMax - b.acPowerMax : b.acPowerMax - a.acPowerMax,
  )[0];
  if (!found) throw new Error('The starter set has no inverter.');
  return found.name;
}

/** Draws a whole site from its specification: rows of modules on the roof, inputs, inverters, serials, roster order. */
export function layOut(
  spec: SiteSpec,
  place: Place,
  types: { modules: readonly ModuleType[]; units: readonly UnitType[] },
): SitePlan {
  const key = slug(spec.name);
  const chance = keyOf(key);
  const moduleType = typeNamed(types.modules, spec.moduleType);
  const unitType = typeNamed(types.units, spec.unitType);
  const logger = `LG-${hex(chance & 0xffffff, 6)}`;
  const batch = `${'BCDFGHJKLMNPQRSTVWXYZ'[chance % 21]}${hex(chance >>> 8, 4).slice(-3)}`;
  const inputsPerInverter = spec.inputsPerInverter ?? 6;
  const strings: StringPlan[] = [];
  const inputPower: number[] = [];
  let serials = 0;
  let row = 0;
  let input = -1;

  for (const block of spec.blocks) {
    let column = 0;
    if (strings.length > 0) row += 1;
    for (let s = 0; s < block.strings; s++) {
      const units = typeof block.units === 'number' ? block.units : (block.units[s] ?? 0);
      const gateway =
        typeof block.gateways === 'number'
          ? block.gateways
          : (block.gateways[s % block.gateways.length] ?? 0);
      if (s % (block.perInput ?? 1) === 0) input += 1;
      inputPower[input] = (inputPower[input] ?? 0) + units * moduleType.vmpRef * moduleType.impRef;
      const slots: SlotPlan[] = [];
      for (let u = 0; u < units; u++) {
        if (column === IN_A_ROW) [row, column] = [row + 1, 0];
        slots.push({
          serial: serialOf(batch, serials++, chance),
          moduleType: spec.moduleType,
          roofX: round(0.6 + column * MODULE_WIDTH),
          roofY: round(0.6 + row * (MODULE_DEPTH + ROW_GAP)),
          roofPlace: `${block.plane}, ${ordinal(row + 1)} row, ${ordinal(column + 1)} from the gable`,
          gateway,
        });
        column += 1;
      }
      strings.push({
        name: `${block.name}${s + 1}`,
        plane: block.plane,
        inverter: `Inverter ${Math.floor(input / inputsPerInverter) + 1}`,
        input: (input % inputsPerInverter) + 1,
        zone: block.zone,
        logger,
        rosterIndex: strings.length,
        unitType: spec.unitType,
        kind: unitType.kind,
        homeRunLeavesArray: block.homeRunLeavesArray ?? true,
        cableResistance: round(0.18 + 0.012 * units + ((mix(chance, strings.length) % 20) - 10) / 200),
        transmitters: block.transmitters ?? [],
        slots,
      });
    }
  }

  const width = round(1.2 + IN_A_ROW * MODULE_WIDTH);
  const depth = round(1.2 + (row + 1) * (MODULE_DEPTH + ROW_GAP));
  const longest = Math.max(...strings.map((s) => s.slots.length));
  const inverters = Array.from({ length: Math.floor(input / inputsPerInverter) + 1 }, (_, i) => {
    const first = i * inputsPerInverter;
    const power = inputPower.slice(first, first + inputsPerInverter);
    const total = power.reduce((a, b) => a + b, 0);
    const acPowerMax = Math.max(1000, Math.round(total / (spec.oversizing ?? 1.1) / 500) * 500);
    return {
      name: `Inverter ${i + 1}`,
      acPowerMax,
      inputs: power.map((_power, n) => n + 1),
      type: inverterTypeFor({ acPowerMax, inputs: power.length, voltage: longest * moduleType.vocRef }),
    };
  });

  const [temperatureMean, temperatureSeason, temperatureDay] = place.temperature;
  return {
    key,
    name: spec.name,
    place: place.place,
    latitude: place.latitude,
    longitude: place.longitude,
    altitude: place.altitude,
    timeZone: place.timeZone,
    stage: spec.stage ?? 'operating',
    ruleSet: spec.ruleSet ?? 'rapid_shutdown_30s',
    structure: spec.structure ?? 'other_building',
    temperatureMin: temperatureMean - temperatureSeason - temperatureDay - COLD_SPELL,
    temperatureMax: temperatureMean + temperatureSeason + temperatureDay + HEAT_WAVE,
    switchedOnOn: spec.switchedOnOn,
    shutdownSwitchPlace: spec.shutdownSwitchPlace,
    contactName: spec.contactName,
    contactPhone: spec.contactPhone,
    outline: [
      [0, 0],
      [width, 0],
      [width, depth],
      [0, depth],
    ],
    reportIntervalS: spec.reportIntervalS ?? 60,
    // South of the equator a roof that is drawn facing the noon sun faces north.
    planes: spec.planes.map((p) => ({
      ...p,
      name: p.name,
      surfaceAzimuth: place.latitude < 0 ? (540 - p.surfaceAzimuth) % 360 : p.surfaceAzimuth,
    })),
    inverters,
    initiators: spec.initiators,
    zones: spec.zones,
    transmitters: spec.transmitters ?? [],
    loggers: [
      {
        serial: logger,
        firmware: '2.4.1',
        gateways: spec.gatewayNames.map((name, i) => ({ number: i + 1, name })),
        sensors: [{ number: 0, kind: 'poa_global', plane: spec.planes[0]?.name ?? null }],
      },
    ],
    strings,
    climate: {
      clearShare: 0.45,
      cloudyShare: 0.2,
      temperatureMean,
      temperatureSeason,
      temperatureDay,
      windMean: 3,
      soilingPerDay: 0.0006,
      fairToday: true,
      ...spec.climate,
    },
    obstacles: spec.obstacles ?? [],
    strangers: (spec.strangers ?? []).map(({ gateway, seat }, i) => {
      const drawn = strings.find((s) => s.name === seat?.string)?.slots[(seat?.position ?? 0) - 1]?.serial;
      return {
        serial: seat?.misread && drawn ? misread(drawn) : serialOf(batch, 9000 + i, chance),
        logger,
        gateway,
        ...(seat ? { seat: { string: seat.string, position: seat.position } } : {}),
      };
    }),
    faults: spec.faults ?? [],
    openInitiators: spec.openInitiators ?? [],
  };
}

const round = (n: number): number => Math.round(n * 100) / 100;
