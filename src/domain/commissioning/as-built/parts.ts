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
  { value: 'rapid_shutdown_30s', label: 'Rapid shutdown, 30 V within 30 s' },
  { value: 'rapid_shutdown_10s', label: 'Rapid shutdown, older edition, 10 s' },
  { value: 'hazard_control', label: 'Listed hazard-control system instead' },
  { value: 'none', label: 'No rapid shutdown required' },
] as const;
export const STRUCTURES = [
  { value: 'one_or_two_family_dwelling', label: 'One- or two-family dwelling' },
  { value: 'other_building', label: 'Another building' },
  { value: 'not_on_building', label: 'Not on a building' },
] as const;
export const SENSOR_KINDS = [
  { value: 'poa_global', label: 'Irradiance in the plane' },
  { value: 'ghi', label: 'Irradiance, horizontal' },
  { value: 'ambient', label: 'Air and wind, no irradiance' },
] as const;

const name = (hint?: string): PartField => ({
  kind: 'text',
  key: 'name',
  label: 'Name',
  longest: 80,
  ...(hint === undefined ? {} : { hint }),
});

export const PART_FIELDS: Record<PartKind, readonly PartField[]> = {
  site: [
    { kind: 'text', key: 'name', label: 'Name', longest: 120, hint: 'As your people call the site.' },
    { kind: 'text', key: 'place', label: 'Place', longest: 200, optional: true, hint: 'Town, or address.' },
    {
      kind: 'number',
      key: 'latitude',
      label: 'Latitude',
      min: -90,
      max: 90,
      unit: '°',
      hint: 'North of the equator is positive.',
    },
    {
      kind: 'number',
      key: 'longitude',
      label: 'Longitude',
      min: -180,
      max: 180,
      unit: '°',
      hint: 'East of Greenwich is positive.',
    },
    { kind: 'number', key: 'altitude', label: 'Altitude', min: -450, max: 6000, unit: 'm' },
    { kind: 'time_zone', key: 'timeZone', label: 'Time zone', hint: 'Days, reports and times go by it.' },
    {
      kind: 'choice',
      key: 'ruleSet',
      label: 'Rule set',
      options: RULE_SETS,
      hint: 'What the authority having jurisdiction requires here.',
    },
    { kind: 'choice', key: 'structure', label: 'Structure', options: STRUCTURES },
    {
      kind: 'number',
      key: 'reportIntervalS',
      label: 'Report interval',
      min: 10,
      max: 900,
      unit: 's',
      whole: true,
      hint: 'How often the loggers report.',
    },
    {
      kind: 'number',
      key: 'temperatureMin',
      label: 'Coldest expected air',
      min: -60,
      max: 30,
      unit: '°C',
      optional: true,
      hint: 'For the highest voltage. Leave empty where nobody knows: it is then estimated.',
    },
    {
      kind: 'number',
      key: 'temperatureMax',
      label: 'Hottest expected air',
      min: 0,
      max: 60,
      unit: '°C',
      optional: true,
      hint: 'For the lowest voltage.',
    },
    {
      kind: 'text',
      key: 'shutdownSwitchPlace',
      label: 'Where the shutdown switch is',
      longest: 200,
      optional: true,
      hint: 'As you would tell somebody on the phone.',
    },
    { kind: 'text', key: 'contactName', label: 'Contact on site', longest: 120, optional: true },
    { kind: 'text', key: 'contactPhone', label: 'Telephone', longest: 40, optional: true },
  ],
  plane: [
    name('"South roof", say.'),
    {
      kind: 'number',
      key: 'surfaceTilt',
      label: 'Tilt',
      min: 0,
      max: 90,
      unit: '°',
      hint: '0 is flat, 90 a wall.',
    },
    {
      kind: 'number',
      key: 'surfaceAzimuth',
      label: 'Azimuth',
      min: 0,
      max: 359.99,
      unit: '°',
      hint: 'Clockwise from north: east 90, south 180, west 270.',
    },
    {
      kind: 'number',
      key: 'albedo',
      label: 'Albedo',
      min: 0,
      max: 1,
      unit: '',
      hint: 'What the ground in front reflects; 0.2 where nobody knows.',
    },
  ],
  inverter: [
    name(),
    {
      kind: 'part',
      key: 'inverterType',
      label: 'Type',
      of: 'inverter_type',
      optional: true,
      none: 'Not in the catalogue',
      hint: 'Gives its power and its inputs.',
    },
    { kind: 'number', key: 'acPowerMax', label: 'Rated AC power', min: 100, max: 10_000_000, unit: 'W' },
    { kind: 'number', key: 'inputs', label: 'Inputs', min: 1, max: 64, unit: '', whole: true },
  ],
  initiator: [
    name('The switch that a person operates.'),
    { kind: 'text', key: 'place', label: 'Place', longest: 200, optional: true },
  ],
  zone: [
    name('What one initiator shuts down.'),
    { kind: 'part', key: 'initiator', label: 'Initiator', of: 'initiator' },
  ],
  transmitter: [
    name(),
    { kind: 'part', key: 'zone', label: 'Zone', of: 'zone' },
    { kind: 'parts', key: 'strings', label: 'Strings that it serves', of: 'string' },
  ],
  logger: [
    { kind: 'serial', key: 'serial', label: 'Serial', hint: 'As on its label. It is unique everywhere.' },
  ],
  sensor: [
    { kind: 'choice', key: 'kind', label: 'Measures', options: SENSOR_KINDS },
    { kind: 'part', key: 'logger', label: 'Logger', of: 'logger' },
    {
      kind: 'number',
      key: 'number',
      label: 'Number at the logger',
      min: 0,
      max: 255,
      unit: '',
      whole: true,
    },
    {
      kind: 'part',
      key: 'plane',
      label: 'Plane',
      of: 'plane',
      optional: true,
      none: 'In no plane',
      hint: 'A sensor of irradiance in the plane needs one.',
    },
  ],
  string: [
    { kind: 'text', key: 'name', label: 'Name', longest: 40, hint: 'As on the drawing: A1, B3.' },
    {
      kind: 'number',
      key: 'slots',
      label: 'Slots',
      min: 1,
      max: 63,
      unit: '',
      whole: true,
      hint: 'Modules with a unit, from the negative end.',
    },
    { kind: 'part', key: 'unitType', label: 'Unit type', of: 'unit_type' },
    {
      kind: 'part',
      key: 'moduleType',
      label: 'Module type',
      of: 'module_type',
      optional: true,
      none: 'Several; keep them as they are',
    },
    { kind: 'part', key: 'plane', label: 'Plane', of: 'plane' },
    { kind: 'part', key: 'input', label: 'Inverter input', of: 'input' },
    { kind: 'part', key: 'zone', label: 'Zone', of: 'zone' },
    {
      kind: 'part',
      key: 'logger',
      label: 'Logger',
      of: 'logger',
      optional: true,
      none: 'None',
      hint: 'Units that report need one.',
    },
    {
      kind: 'parts',
      key: 'transmitters',
      label: 'Transmitters that it hears',
      of: 'transmitter',
      hint: 'Shutdown-only units need one.',
    },
    {
      kind: 'number',
      key: 'cableResistance',
      label: 'Cable resistance',
      min: 0,
      max: 20,
      unit: 'Ω',
      hint: 'Home run and leads, there and back.',
    },
    { kind: 'yes', key: 'homeRunLeavesArray', label: 'The home run leaves the array boundary' },
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

export const PART_WORDS: Record<PartKind, { one: string; many: string; a: string }> = {
  site: { one: 'site', many: 'sites', a: 'a site' },
  plane: { one: 'plane', many: 'planes', a: 'a plane' },
  inverter: { one: 'inverter', many: 'inverters', a: 'an inverter' },
  initiator: { one: 'initiator', many: 'initiators', a: 'an initiator' },
  zone: { one: 'zone', many: 'zones', a: 'a zone' },
  transmitter: { one: 'transmitter', many: 'transmitters', a: 'a transmitter' },
  logger: { one: 'logger', many: 'loggers', a: 'a logger' },
  sensor: { one: 'sensor', many: 'sensors', a: 'a sensor' },
  string: { one: 'string', many: 'strings', a: 'a string' },
};

/** Kinds of units that report: their strings need a logger. The others need a transmitter. */
export const reports = (kind: (typeof UNIT_KINDS)[number]): boolean => kind !== 'shutdown_only';

export const fieldOf = (kind: PartKind, key: string): PartField | undefined =>
  PART_FIELDS[kind].find((f) => f.key === key);
