import {
  partFieldTexts,
  ruleSetLabels,
  sensorKindLabels,
  structureLabels,
} from '../../../words/domain-as-built-parts';
import { UNIT_KINDS } from '../../equipment/unit-type';

/**
 * What the parts of a site are made of, field by field: forms, checks and the history all read these tables. A part
 * travels as a flat record by field key; other parts are named by their public identifier.
 */
export const PART_KINDS = [
  'site',
  'plane',
  'inverter',
  'initiator',
  'zone',
  'transmitter',
  'logger',
  'sensor',
  'string',
] as const;
export type PartKind = (typeof PART_KINDS)[number];

/** What a field may name by identifier. */
export const NAMED_KINDS = [
  'plane',
  'input',
  'initiator',
  'zone',
  'transmitter',
  'logger',
  'string',
  'unit_type',
  'module_type',
  'inverter_type',
] as const;
export type NamedKind = (typeof NAMED_KINDS)[number];

interface Common {
  key: string;
  label: string;
  hint?: string;
}
export type PartField =
  | (Common & { kind: 'text'; longest: number; optional?: boolean })
  /** Upper case, the pattern of serials. */
  | (Common & { kind: 'serial' })
  | (Common & {
      kind: 'number';
      min: number;
      max: number;
      unit: string;
      whole?: boolean;
      /** May be left empty: not known. */
      optional?: boolean;
    })
  | (Common & { kind: 'choice'; options: readonly { value: string; label: string }[] })
  | (Common & { kind: 'time_zone' })
  | (Common & { kind: 'yes' })
  | (Common & { kind: 'part'; of: NamedKind; optional?: boolean; none?: string })
  | (Common & { kind: 'parts'; of: NamedKind });

export const RULE_SETS = [
  { value: 'rapid_shutdown_30s', label: ruleSetLabels.rapid_shutdown_30s },
  { value: 'rapid_shutdown_10s', label: ruleSetLabels.rapid_shutdown_10s },
  { value: 'hazard_control', label: ruleSetLabels.hazard_control },
  { value: 'none', label: ruleSetLabels.none },
] as const;
export const STRUCTURES = [
  { value: 'one_or_two_family_dwelling', label: structureLabels.one_or_two_family_dwelling },
  { value: 'other_building', label: structureLabels.other_building },
  { value: 'not_on_building', label: structureLabels.not_on_building },
] as const;
export const SENSOR_KINDS = [
  { value: 'poa_global', label: sensorKindLabels.poa_global },
  { value: 'ghi', label: sensorKindLabels.ghi },
  { value: 'ambient', label: sensorKindLabels.ambient },
] as const;

const name = (texts: Pick<PartField, 'label' | 'hint'>): PartField => ({
  kind: 'text',
  key: 'name',
  longest: 80,
  ...texts,
});

const texts = partFieldTexts;
export const PART_FIELDS: Record<PartKind, readonly PartField[]> = {
  site: [
    { kind: 'text', key: 'name', longest: 120, ...texts.site.name },
    { kind: 'text', key: 'place', longest: 200, optional: true, ...texts.site.place },
    { kind: 'number', key: 'latitude', min: -90, max: 90, unit: '°', ...texts.site.latitude },
    { kind: 'number', key: 'longitude', min: -180, max: 180, unit: '°', ...texts.site.longitude },
    { kind: 'number', key: 'altitude', min: -450, max: 6000, unit: 'm', ...texts.site.altitude },
    { kind: 'time_zone', key: 'timeZone', ...texts.site.timeZone },
    { kind: 'choice', key: 'ruleSet', options: RULE_SETS, ...texts.site.ruleSet },
    { kind: 'choice', key: 'structure', options: STRUCTURES, ...texts.site.structure },
    {
      kind: 'number',
      key: 'reportIntervalS',
      min: 10,
      max: 900,
      unit: 's',
      whole: true,
      ...texts.site.reportIntervalS,
    },
    {
      kind: 'number',
      key: 'temperatureMin',
      min: -60,
      max: 30,
      unit: '°C',
      optional: true,
      ...texts.site.temperatureMin,
    },
    {
      kind: 'number',
      key: 'temperatureMax',
      min: 0,
      max: 60,
      unit: '°C',
      optional: true,
      ...texts.site.temperatureMax,
    },
    {
      kind: 'text',
      key: 'shutdownSwitchPlace',
      longest: 200,
      optional: true,
      ...texts.site.shutdownSwitchPlace,
    },
    { kind: 'text', key: 'contactName', longest: 120, optional: true, ...texts.site.contactName },
    { kind: 'text', key: 'contactPhone', longest: 40, optional: true, ...texts.site.contactPhone },
  ],
  plane: [
    name(texts.plane.name),
    { kind: 'number', key: 'surfaceTilt', min: 0, max: 90, unit: '°', ...texts.plane.surfaceTilt },
    { kind: 'number', key: 'surfaceAzimuth', min: 0, max: 359.99, unit: '°', ...texts.plane.surfaceAzimuth },
    { kind: 'number', key: 'albedo', min: 0, max: 1, unit: '', ...texts.plane.albedo },
  ],
  inverter: [
    name(texts.inverter.name),
    {
      kind: 'part',
      key: 'inverterType',
      of: 'inverter_type',
      optional: true,
      ...texts.inverter.inverterType,
    },
    { kind: 'number', key: 'acPowerMax', min: 100, max: 10_000_000, unit: 'W', ...texts.inverter.acPowerMax },
    { kind: 'number', key: 'inputs', min: 1, max: 64, unit: '', whole: true, ...texts.inverter.inputs },
  ],
  initiator: [
    name(texts.initiator.name),
    { kind: 'text', key: 'place', longest: 200, optional: true, ...texts.initiator.place },
  ],
  zone: [name(texts.zone.name), { kind: 'part', key: 'initiator', of: 'initiator', ...texts.zone.initiator }],
  transmitter: [
    name(texts.transmitter.name),
    { kind: 'part', key: 'zone', of: 'zone', ...texts.transmitter.zone },
    { kind: 'parts', key: 'strings', of: 'string', ...texts.transmitter.strings },
  ],
  logger: [{ kind: 'serial', key: 'serial', ...texts.logger.serial }],
  sensor: [
    { kind: 'choice', key: 'kind', options: SENSOR_KINDS, ...texts.sensor.kind },
    { kind: 'part', key: 'logger', of: 'logger', ...texts.sensor.logger },
    { kind: 'number', key: 'number', min: 0, max: 255, unit: '', whole: true, ...texts.sensor.number },
    { kind: 'part', key: 'plane', of: 'plane', optional: true, ...texts.sensor.plane },
  ],
  string: [
    { kind: 'text', key: 'name', longest: 40, ...texts.string.name },
    { kind: 'number', key: 'slots', min: 1, max: 63, unit: '', whole: true, ...texts.string.slots },
    { kind: 'part', key: 'unitType', of: 'unit_type', ...texts.string.unitType },
    { kind: 'part', key: 'moduleType', of: 'module_type', optional: true, ...texts.string.moduleType },
    { kind: 'part', key: 'plane', of: 'plane', ...texts.string.plane },
    { kind: 'part', key: 'input', of: 'input', ...texts.string.input },
    { kind: 'part', key: 'zone', of: 'zone', ...texts.string.zone },
    { kind: 'part', key: 'logger', of: 'logger', optional: true, ...texts.string.logger },
    { kind: 'parts', key: 'transmitters', of: 'transmitter', ...texts.string.transmitters },
    { kind: 'number', key: 'cableResistance', min: 0, max: 20, unit: 'Ω', ...texts.string.cableResistance },
    { kind: 'yes', key: 'homeRunLeavesArray', ...texts.string.homeRunLeavesArray },
  ],
};

/** What a new part begins with. */
export const PART_DEFAULTS: Record<
  PartKind,
  Readonly<Record<string, string | number | boolean | null | readonly string[]>>
> = {
  site: {
    name: '',
    place: '',
    latitude: null,
    longitude: null,
    altitude: 0,
    timeZone: 'UTC',
    ruleSet: 'rapid_shutdown_30s',
    structure: 'other_building',
    reportIntervalS: 60,
    temperatureMin: null,
    temperatureMax: null,
    shutdownSwitchPlace: '',
    contactName: '',
    contactPhone: '',
  },
  plane: { name: '', surfaceTilt: null, surfaceAzimuth: null, albedo: 0.2 },
  inverter: { name: '', inverterType: null, acPowerMax: null, inputs: 2 },
  initiator: { name: '', place: '' },
  zone: { name: '', initiator: null },
  transmitter: { name: '', zone: null, strings: [] },
  logger: { serial: '' },
  sensor: { kind: 'poa_global', logger: null, number: 1, plane: null },
  string: {
    name: '',
    slots: null,
    unitType: null,
    moduleType: null,
    plane: null,
    input: null,
    zone: null,
    logger: null,
    transmitters: [],
    cableResistance: 0.3,
    homeRunLeavesArray: true,
  },
};

/** Kinds of units that report: their strings need a logger. The others need a transmitter. */
export const reports = (kind: (typeof UNIT_KINDS)[number]): boolean => kind !== 'shutdown_only';

export const fieldOf = (kind: PartKind, key: string): PartField | undefined =>
  PART_FIELDS[kind].find((f) => f.key === key);
