import type { PartKind } from '../domain/commissioning/as-built/parts';

/** What the parts of a site are called, and what their fields ask for. */

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

export const ruleSetLabels = {
  rapid_shutdown_30s: 'Rapid shutdown, 30 V within 30 s',
  rapid_shutdown_10s: 'Rapid shutdown, older edition, 10 s',
  hazard_control: 'Listed hazard-control system instead',
  none: 'No rapid shutdown required',
};

export const structureLabels = {
  one_or_two_family_dwelling: 'One- or two-family dwelling',
  other_building: 'Another building',
  not_on_building: 'Not on a building',
};

export const sensorKindLabels = {
  poa_global: 'Irradiance in the plane',
  ghi: 'Irradiance, horizontal',
  ambient: 'Air and wind, no irradiance',
};

/** Of each part's fields by key: label, hint, and what stands where no part is chosen. */
export const partFieldTexts = {
  site: {
    name: { label: 'Name', hint: 'As your people call the site.' },
    place: { label: 'Place', hint: 'Town, or address.' },
    latitude: { label: 'Latitude', hint: 'North of the equator is positive.' },
    longitude: { label: 'Longitude', hint: 'East of Greenwich is positive.' },
    altitude: { label: 'Altitude' },
    timeZone: { label: 'Time zone', hint: 'Days, reports and times go by it.' },
    ruleSet: { label: 'Rule set', hint: 'What the authority having jurisdiction requires here.' },
    structure: { label: 'Structure' },
    reportIntervalS: { label: 'Report interval', hint: 'How often the loggers report.' },
    temperatureMin: {
      label: 'Coldest expected air',
      hint: 'For the highest voltage. Leave empty where nobody knows: it is then estimated.',
    },
    temperatureMax: { label: 'Hottest expected air', hint: 'For the lowest voltage.' },
    shutdownSwitchPlace: {
      label: 'Where the shutdown switch is',
      hint: 'As you would tell somebody on the phone.',
    },
    contactName: { label: 'Contact on site' },
    contactPhone: { label: 'Telephone' },
  },
  plane: {
    name: { label: 'Name', hint: '"South roof", say.' },
    surfaceTilt: { label: 'Tilt', hint: '0 is flat, 90 a wall.' },
    surfaceAzimuth: { label: 'Azimuth', hint: 'Clockwise from north: east 90, south 180, west 270.' },
    albedo: { label: 'Albedo', hint: 'What the ground in front reflects; 0.2 where nobody knows.' },
  },
  inverter: {
    name: { label: 'Name' },
    inverterType: { label: 'Type', hint: 'Gives its power and its inputs.', none: 'Not in the catalogue' },
    acPowerMax: { label: 'Rated AC power' },
    inputs: { label: 'Inputs' },
  },
  initiator: {
    name: { label: 'Name', hint: 'The switch that a person operates.' },
    place: { label: 'Place' },
  },
  zone: {
    name: { label: 'Name', hint: 'What one initiator shuts down.' },
    initiator: { label: 'Initiator' },
  },
  transmitter: {
    name: { label: 'Name' },
    zone: { label: 'Zone' },
    strings: { label: 'Strings that it serves' },
  },
  logger: { serial: { label: 'Serial', hint: 'As on its label. It is unique everywhere.' } },
  sensor: {
    kind: { label: 'Measures' },
    logger: { label: 'Logger' },
    number: { label: 'Number at the logger' },
    plane: { label: 'Plane', hint: 'A sensor of irradiance in the plane needs one.', none: 'In no plane' },
  },
  string: {
    name: { label: 'Name', hint: 'As on the drawing: A1, B3.' },
    slots: { label: 'Slots', hint: 'Modules with a unit, from the negative end.' },
    unitType: { label: 'Unit type' },
    moduleType: { label: 'Module type', none: 'Several; keep them as they are' },
    plane: { label: 'Plane' },
    input: { label: 'Inverter input' },
    zone: { label: 'Zone' },
    logger: { label: 'Logger', hint: 'Units that report need one.', none: 'None' },
    transmitters: { label: 'Transmitters that it hears', hint: 'Shutdown-only units need one.' },
    cableResistance: { label: 'Cable resistance', hint: 'Home run and leads, there and back.' },
    homeRunLeavesArray: { label: 'The home run leaves the array boundary' },
  },
};

/** How parts are named that carry a number of their whole. */
export const partNames = {
  input: (inverter: string, number: number) => `${inverter}, input ${number}`,
  /** `logger` undefined: one that is gone. */
  sensor: (logger: string | undefined, number: string) => `${logger ?? 'logger'}, sensor ${number}`,
  archived: (name: string) => `${name} (archived)`,
};
