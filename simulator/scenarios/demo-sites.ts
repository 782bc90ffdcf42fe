import {
  BOTH_SIDES,
  HOLDING,
  MONO_430,
  MONO_450,
  ON_KEEP_ALIVE,
  OPTIMIZING,
  OUTPUT_SIDE,
  POLY_285,
  SHUTDOWN_ONLY,
} from './catalogue';
import type { Block, SiteSpec } from './lay-out';

/** A site of the demo and the solar hour at which it stands when the demo starts afresh. */
export interface DemoSite {
  hour: number;
  spec: SiteSpec;
}

const plane = (name: string, surfaceTilt: number, surfaceAzimuth: number) => ({
  name,
  surfaceTilt,
  surfaceAzimuth,
  albedo: 0.2,
});
const block = (
  name: string,
  strings: number,
  units: number | number[],
  plane: string,
  gateways: number | number[],
  more: Partial<Block> = {},
): Block => ({ name, strings, units, plane, zone: 'Whole roof', gateways, ...more });
const oneZone = (place: string) => ({
  initiators: [{ name: 'Main initiator', place }],
  zones: [{ name: 'Whole roof', initiator: 'Main initiator' }],
});

export const LOWFIELD_SITES: DemoSite[] = [
  {
    hour: 10.2,
    spec: {
      name: 'Old Tannery Market Hall',
      stage: 'commissioning',
      switchedOnOn: null,
      shutdownSwitchPlace: 'Beside the service entrance on Bark Lane, left of the meter cabinet',
      contactName: 'Idony Marrable',
      contactPhone: '+00 555 0101',
      reportIntervalS: 10,
      moduleType: MONO_450,
      unitType: BOTH_SIDES,
      planes: [plane('South roof', 18, 180), plane('East roof', 18, 95)],
      ...oneZone('Service entrance, Bark Lane'),
      gatewayNames: ['Gateway 1, stair head', 'Gateway 2, north gable'],
      blocks: [
        block('A', 3, 14, 'South roof', 1),
        block('B', 4, 14, 'South roof', [1, 1, 1, 2]),
        block('C', 3, 12, 'East roof', 2),
        block('D', 3, [17, 17, 16], 'South roof', 2),
      ],
      inputsPerInverter: 7,
      climate: { fairToday: true, clearShare: 0.6, cloudyShare: 0.1 },
      strangers: [
        { gateway: 1, seat: { string: 'B1', position: 2, misread: true } },
        { gateway: 1, seat: { string: 'B1', position: 9, misread: false } },
      ],
      faults: [
        { fault: { kind: 'stuck', string: 'B3', position: 5, at: 'next_release' }, sinceS: 0 },
        { fault: { kind: 'stuck', string: 'B3', position: 9, at: 'next_release' }, sinceS: 0 },
        {
          fault: { kind: 'wrong_string', string: 'C3', position: 4, otherString: 'D1', otherPosition: 4 },
          sinceS: 0,
        },
        { fault: { kind: 'unit_mute', string: 'C2', position: 7 }, sinceS: 0 },
      ],
    },
  },
  {
    hour: 13,
    spec: {
      name: 'Kestrel Row School',
      switchedOnOn: '2025-04-14',
      shutdownSwitchPlace: 'Boiler room door, yard side; second switch at the gym’s fire panel',
      contactName: 'Ansel Thwaite',
      contactPhone: '+00 555 0102',
      moduleType: MONO_430,
      unitType: OUTPUT_SIDE,
      planes: [plane('Main roof', 25, 170), plane('Gym roof', 8, 170)],
      initiators: [
        { name: 'Main initiator', place: 'Boiler room door, yard side' },
        { name: 'Gym initiator', place: 'Fire panel in the gym’s lobby' },
      ],
      zones: [
        { name: 'Main building', initiator: 'Main initiator' },
        { name: 'Gym', initiator: 'Gym initiator' },
      ],
      gatewayNames: ['Gateway 1, attic', 'Gateway 2, gym'],
      blocks: [
        block('A', 8, 12, 'Main roof', 1, { zone: 'Main building' }),
        block('B', 8, 12, 'Main roof', 1, { zone: 'Main building' }),
        block('C', 10, 12, 'Gym roof', 2, { zone: 'Gym' }),
      ],
      faults: [
        {
          fault: { kind: 'not_shutting_down', string: 'C2', position: 3, claims: 'passing' },
          sinceS: 86_400,
        },
        {
          fault: { kind: 'not_shutting_down', string: 'C2', position: 11, claims: 'passing' },
          sinceS: 86_400,
        },
      ],
      openInitiators: [{ initiator: 'Gym initiator', sinceS: 1500, by: 'Gym initiator, quarterly drill' }],
    },
  },
  {
    hour: 12,
    spec: {
      name: 'Quayside Cold Store',
      switchedOnOn: '2024-09-02',
      shutdownSwitchPlace: 'Loading dock 4, beside the fire brigade’s panel',
      contactName: 'Merrin Oakshott',
      contactPhone: '+00 555 0103',
      moduleType: MONO_450,
      unitType: ON_KEEP_ALIVE,
      planes: [plane('Shed roof south', 10, 180), plane('Shed roof west', 10, 270)],
      initiators: [{ name: 'Dock initiator', place: 'Loading dock 4' }],
      zones: [{ name: 'Whole roof', initiator: 'Dock initiator' }],
      transmitters: ['T1', 'T2', 'T3', 'T4'].map((name) => ({ name, zone: 'Whole roof' })),
      gatewayNames: ['Gateway 1, east', 'Gateway 2, middle', 'Gateway 3, west', 'Gateway 4, annexe'],
      blocks: [
        block('A', 20, 20, 'Shed roof south', 1, { transmitters: ['T1'] }),
        block('B', 21, 20, 'Shed roof south', 2, { transmitters: ['T2'] }),
        block('C', 20, 20, 'Shed roof west', 3, { transmitters: ['T3'] }),
        block('D', 2, 10, 'Shed roof west', 4, { transmitters: ['T4'] }),
      ],
      faults: [
        {
          fault: { kind: 'transmitter_unheard', transmitter: 'T4', strings: ['D1', 'D2'] },
          sinceS: 93_600,
        },
      ],
    },
  },
  {
    hour: 14,
    spec: {
      name: 'Millrace Housing',
      switchedOnOn: '2025-06-23',
      shutdownSwitchPlace: 'Plant room, ground floor of block 2',
      contactName: 'Perpetua Lyle',
      contactPhone: '+00 555 0104',
      moduleType: MONO_430,
      unitType: HOLDING,
      planes: [plane('Blocks 1 to 3', 30, 190), plane('Laundry roof', 12, 120)],
      ...oneZone('Plant room, block 2'),
      gatewayNames: ['Gateway 1, block 1', 'Gateway 2, block 3', 'Gateway 3, laundry'],
      blocks: [
        block('A', 19, 16, 'Blocks 1 to 3', 1),
        block('B', 18, 16, 'Blocks 1 to 3', 2),
        block('C', 4, 12, 'Laundry roof', 3),
      ],
      faults: [
        { fault: { kind: 'gateway_out', logger: '', gateway: 3, keeps: false }, sinceS: 2460 },
        { fault: { kind: 'connector', string: 'B7', ohm: 0.9 }, sinceS: 1_209_600 },
      ],
    },
  },
  {
    hour: 21,
    spec: {
      name: 'Furrowfield Depot',
      switchedOnOn: '2024-03-18',
      shutdownSwitchPlace: 'Gatehouse, behind the barrier',
      contactName: 'Corwin Blakeley',
      contactPhone: '+00 555 0105',
      moduleType: MONO_450,
      unitType: OUTPUT_SIDE,
      planes: [plane('Hall 1', 10, 180), plane('Hall 2', 10, 180)],
      ...oneZone('Gatehouse'),
      gatewayNames: ['Gateway 1', 'Gateway 2', 'Gateway 3', 'Gateway 4', 'Gateway 5', 'Gateway 6'],
      blocks: [
        block('A', 26, 20, 'Hall 1', [1, 1, 1, 2, 2, 2, 3, 3, 3], { perInput: 2 }),
        block('B', 26, 20, 'Hall 2', [4, 4, 4, 5, 5, 5, 6, 6, 6], { perInput: 2 }),
      ],
      climate: { soilingPerDay: 0.002 },
    },
  },
  {
    hour: 11,
    spec: {
      name: 'Lantern Works',
      switchedOnOn: '2025-02-10',
      shutdownSwitchPlace: 'Main gate, inside the wicket door',
      contactName: 'Tamsin Orrell',
      contactPhone: '+00 555 0106',
      moduleType: MONO_450,
      unitType: BOTH_SIDES,
      planes: [plane('Saw-tooth roof', 35, 175)],
      ...oneZone('Main gate'),
      gatewayNames: ['Gateway 1', 'Gateway 2'],
      blocks: [block('A', 15, 14, 'Saw-tooth roof', 1), block('B', 15, 14, 'Saw-tooth roof', 2)],
      openInitiators: [{ initiator: 'Main initiator', sinceS: 5400, by: 'Main initiator, roof repair' }],
    },
  },
  {
    hour: 15.5,
    spec: {
      name: 'Weirside Clinic',
      switchedOnOn: '2025-08-04',
      shutdownSwitchPlace: 'Ambulance entrance, right-hand wall',
      contactName: 'Dr Linnet Ashgrove',
      contactPhone: '+00 555 0107',
      moduleType: MONO_430,
      unitType: BOTH_SIDES,
      planes: [plane('Clinic roof', 20, 185)],
      ...oneZone('Ambulance entrance'),
      gatewayNames: ['Gateway 1'],
      blocks: [block('A', 8, 12, 'Clinic roof', 1)],
      inputsPerInverter: 4,
      obstacles: [{ name: 'Lift house', x: 20, y: 9.8, height: 2.4, radius: 1.8 }],
    },
  },
  {
    hour: 9.5,
    spec: {
      name: 'Coopers Wharf Gallery',
      switchedOnOn: '2025-05-19',
      shutdownSwitchPlace: 'Cloakroom corridor, beside the alarm panel',
      contactName: 'Hollis Verrier',
      contactPhone: '+00 555 0108',
      moduleType: POLY_285,
      unitType: SHUTDOWN_ONLY,
      planes: [plane('Gallery roof', 15, 200)],
      ...oneZone('Cloakroom corridor'),
      transmitters: [
        { name: 'T1', zone: 'Whole roof' },
        { name: 'T2', zone: 'Whole roof' },
      ],
      gatewayNames: [],
      blocks: [
        block('A', 6, 15, 'Gallery roof', 0, { transmitters: ['T1'] }),
        block('B', 4, 15, 'Gallery roof', 0, { transmitters: ['T2'], perInput: 2 }),
      ],
      inputsPerInverter: 4,
    },
  },
  {
    hour: 12.5,
    spec: {
      name: 'Slate Lane Library',
      switchedOnOn: '2025-07-07',
      shutdownSwitchPlace: 'Reading room lobby, behind the desk',
      contactName: 'Winifred Castleton',
      contactPhone: '+00 555 0109',
      moduleType: MONO_430,
      unitType: OPTIMIZING,
      planes: [plane('Slate roof east', 40, 110), plane('Slate roof south', 40, 200)],
      ...oneZone('Reading room lobby'),
      gatewayNames: ['Gateway 1, loft'],
      blocks: [block('A', 4, 14, 'Slate roof east', 1), block('B', 4, 14, 'Slate roof south', 1)],
      inputsPerInverter: 4,
      obstacles: [{ name: 'Chimney', x: 18, y: 5.2, height: 1.7, radius: 0.6 }],
    },
  },
  {
    hour: 14.5,
    spec: {
      name: 'Beacon Street Flats',
      switchedOnOn: '2025-03-03',
      shutdownSwitchPlace: 'Bin store, north end',
      contactName: 'Osbert Finlay',
      contactPhone: '+00 555 0110',
      moduleType: POLY_285,
      unitType: BOTH_SIDES,
      planes: [plane('Flat roof', 12, 180)],
      ...oneZone('Bin store'),
      gatewayNames: ['Gateway 1', 'Gateway 2'],
      blocks: [block('A', 10, 12, 'Flat roof', 1), block('B', 10, 12, 'Flat roof', 2, { perInput: 2 })],
      faults: [
        { fault: { kind: 'bypass_diode', string: 'A4', position: 7, groups: 1 }, sinceS: 777_600 },
        {
          fault: { kind: 'wrong_string', string: 'A8', position: 4, otherString: 'A9', otherPosition: 4 },
          sinceS: 23_000_000,
        },
        { fault: { kind: 'soiling', string: 'A2', share: 0.12 }, sinceS: 2_000_000 },
      ],
    },
  },
  {
    hour: 8,
    spec: {
      name: 'Glasshouse Nursery',
      switchedOnOn: '2024-11-25',
      shutdownSwitchPlace: 'Potting shed, outside wall',
      contactName: 'Rosalba Tinley',
      contactPhone: '+00 555 0111',
      moduleType: MONO_430,
      unitType: BOTH_SIDES,
      planes: [plane('Packing hall', 15, 160)],
      ...oneZone('Potting shed'),
      gatewayNames: ['Gateway 1', 'Gateway 2'],
      blocks: [block('A', 8, 14, 'Packing hall', 1), block('B', 8, 14, 'Packing hall', 2)],
      faults: [
        { fault: { kind: 'stuck', string: 'B2', position: 4, at: 'now' }, sinceS: 352_800 },
        { fault: { kind: 'stuck', string: 'B2', position: 11, at: 'now' }, sinceS: 352_800 },
      ],
    },
  },
];

export const HARBOURLINE_SITES: DemoSite[] = [
  {
    hour: 10.8,
    spec: {
      name: 'Netloft Terrace',
      structure: 'one_or_two_family_dwelling',
      switchedOnOn: '2025-06-02',
      shutdownSwitchPlace: 'Alley side, beside the meters',
      contactName: 'Ebba Strand',
      contactPhone: '+00 555 0201',
      moduleType: MONO_430,
      unitType: BOTH_SIDES,
      planes: [plane('Terrace roof', 28, 165)],
      ...oneZone('Alley side'),
      gatewayNames: ['Gateway 1'],
      blocks: [block('A', 5, 12, 'Terrace roof', 1)],
      inputsPerInverter: 5,
    },
  },
  {
    hour: 3,
    spec: {
      name: 'Salt Pan Ferry Hall',
      switchedOnOn: '2024-12-09',
      shutdownSwitchPlace: 'Ticket office, staff door',
      contactName: 'Jorun Pike',
      contactPhone: '+00 555 0202',
      moduleType: MONO_450,
      unitType: OUTPUT_SIDE,
      planes: [plane('Hall roof', 8, 180)],
      ...oneZone('Ticket office'),
      gatewayNames: ['Gateway 1', 'Gateway 2'],
      blocks: [block('A', 7, 20, 'Hall roof', 1), block('B', 6, 20, 'Hall roof', 2)],
    },
  },
];
