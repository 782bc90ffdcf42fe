import { describe, expect, it } from 'vitest';
import type { AsBuilt, AsBuiltView, StringBuilt } from '../../schemas/api/as-built';
import { asBuiltFinding, listedStrings, missingForStrings } from './finding';

const string = (name: string, serials: (string | null)[], some: Partial<StringBuilt> = {}): StringBuilt => ({
  id: `id-${name}`,
  name,
  kind: 'monitored',
  unitType: 'unit',
  plane: 'south',
  input: 'in1',
  zone: 'zone',
  logger: 'logger',
  transmitters: [],
  cableResistance: 0.3,
  homeRunLeavesArray: true,
  slots: serials.map((serial, i) => ({
    position: i + 1,
    serial,
    moduleType: 'mono',
    roofPlace: i === 0 ? 'by the vent' : '',
    roofX: null,
    roofY: null,
    placedFrom: null,
  })),
  ...some,
});
const built = (strings: StringBuilt[], some: Partial<AsBuilt> = {}): AsBuilt => ({
  at: '2026-12-01T12:00:00.000Z',
  site: {
    id: 'site',
    stage: 'commissioning',
    name: 'Ferry Sheds',
    place: '',
    latitude: 51,
    longitude: 0,
    altitude: 0,
    timeZone: 'Europe/London',
    ruleSet: 'rapid_shutdown_30s',
    structure: 'other_building',
    reportIntervalS: 60,
    temperatureMin: null,
    temperatureMax: null,
    shutdownSwitchPlace: '',
    contactName: '',
    contactPhone: '',
  },
  planes: [
    { id: 'south', name: 'South roof', surfaceTilt: 10, surfaceAzimuth: 180, albedo: 0.2 },
    { id: 'east', name: 'East roof', surfaceTilt: 10, surfaceAzimuth: 90, albedo: 0.2 },
  ],
  inverters: [
    { id: 'inv', name: 'W1', inverterType: null, acPowerMax: 5000, inputs: [{ id: 'in1', number: 1 }] },
  ],
  initiators: [{ id: 'init', name: 'Main', place: '' }],
  zones: [{ id: 'zone', name: 'Whole site', initiator: 'init' }],
  transmitters: [],
  loggers: [{ id: 'logger', serial: 'LG-1', lastSpokeAt: null, tokenAt: '2026-12-01T12:00:00.000Z' }],
  sensors: [],
  strings,
  catalogue: {
    moduleTypes: [{ id: 'mono', name: 'Mono', archived: false }],
    unitTypes: [{ id: 'unit', name: 'Unit', archived: false, kind: 'monitored' }],
    inverterTypes: [],
  },
  ...some,
});
const view: AsBuiltView = { find: '', show: 'all', sort: 'name', order: 'up', string: '' };

describe('what is found of an as-built', () => {
  it.each([
    [[string('A1', ['S1', 'S2'])], '1 string, 2 slots; every slot has a serial'],
    [[string('A1', ['S1', null]), string('A2', [null])], '2 strings, 3 slots; 2 slots have no serial'],
    [[string('A1', ['S1', null])], '1 string, 2 slots; 1 slot has no serial'],
    [[string('A1', [null])], '1 string, 1 slot; no slot has a serial yet'],
  ])('%#', (strings, heading) => {
    expect(asBuiltFinding(built(strings)).heading.replaceAll('\u00a0', ' ')).toBe(heading);
  });

  it('a site without strings says what it needs first', () => {
    const bare = built([], { planes: [], loggers: [] });
    expect(asBuiltFinding(bare)).toEqual({
      heading: 'No strings are drawn yet',
      sentence: 'Before a string can be entered, this site needs a plane and a logger or a transmitter.',
    });
    expect(missingForStrings(bare).flatMap((m) => m.add)).toEqual(['plane', 'logger', 'transmitter']);
  });

  it('where all units tell nothing it is the transmitter that is missing', () => {
    const mute = built([], {
      loggers: [],
      catalogue: {
        ...built([]).catalogue,
        unitTypes: [{ id: 'unit', name: 'Unit', archived: false, kind: 'shutdown_only' }],
      },
    });
    expect(missingForStrings(mute).map((m) => m.words)).toEqual(['a transmitter']);
  });

  it('a logger that cannot report is told', () => {
    const mute = built([string('A1', ['S1'])], {
      loggers: [{ id: 'logger', serial: 'LG-1', lastSpokeAt: null, tokenAt: null }],
    });
    expect(asBuiltFinding(mute).sentence).toContain('LG-1 has no token');
  });
});

describe('the list of strings', () => {
  const all = built([
    string('A10', ['S1', null]),
    string('A2', ['S2'], { plane: 'east' }),
    string('B1', [null, null, null]),
  ]);
  const names = (some: Partial<AsBuiltView>) => listedStrings(all, { ...view, ...some }).map((s) => s.name);

  it('is in the order of a person', () => {
    expect(names({})).toEqual(['A2', 'A10', 'B1']);
    expect(names({ order: 'down' })).toEqual(['B1', 'A10', 'A2']);
    expect(names({ sort: 'gaps', order: 'down' })).toEqual(['B1', 'A10', 'A2']);
    expect(names({ sort: 'plane' })).toEqual(['A2', 'A10', 'B1']);
  });
  it('finds by name, serial and place, and by what is missing', () => {
    expect(names({ find: 'a1' })).toEqual(['A10']);
    expect(names({ find: 's2' })).toEqual(['A2']);
    expect(names({ find: 'vent' })).toEqual(['A2', 'A10', 'B1']);
    expect(names({ show: 'gaps' })).toEqual(['A10', 'B1']);
  });
});
