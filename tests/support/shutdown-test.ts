import { randomUUID } from 'node:crypto';
import type { FleetPlan, SitePlan } from '../../simulator/plant/plan';
import {
  BOTH_SIDES,
  MODULE_TYPES,
  MONO_430,
  ON_KEEP_ALIVE,
  SHUTDOWN_ONLY,
  UNIT_TYPES,
} from '../../simulator/scenarios/catalogue';
import { layOut, type Block, type SiteSpec } from '../../simulator/scenarios/lay-out';
import { PLACES, placeAtHour } from '../../simulator/scenarios/places';
import type { Act, TestPlan } from '../../src/domain/commissioning/shutdown-test-record';
import type { SentAct } from '../../src/schemas/api/shutdown-test';

/** Small sites on which shutdown tests are made, and what people do in them. */

export const TEST_INTERVAL_S = 10;
const INITIATOR = { name: 'Initiator', place: 'Gate' };

export function testedFleet(since: number): FleetPlan {
  const free = [...PLACES];
  const site = (
    name: string,
    unitType: string,
    blocks: Partial<Block>[],
    more: Partial<SiteSpec> = {},
  ): SitePlan =>
    layOut(
      {
        name,
        switchedOnOn: '2025-03-03',
        shutdownSwitchPlace: '',
        contactName: '',
        contactPhone: '',
        reportIntervalS: TEST_INTERVAL_S,
        moduleType: MONO_430,
        unitType,
        planes: [{ name: 'Roof', surfaceTilt: 10, surfaceAzimuth: 180, albedo: 0.2 }],
        initiators: [INITIATOR],
        zones: [{ name: 'Roof', initiator: 'Initiator' }],
        gatewayNames: ['Gateway 1'],
        climate: { clearShare: 1, cloudyShare: 0, fairToday: true },
        blocks: blocks.map((b, i) => ({
          name: 'AB'[i] ?? 'C',
          strings: 2,
          units: 8,
          plane: 'Roof',
          zone: 'Roof',
          gateways: 1,
          ...b,
        })),
        ...more,
      },
      placeAtHour(free, since, 10.5),
      { modules: MODULE_TYPES, units: UNIT_TYPES },
    );
  const served: Partial<Block>[] = [{ transmitters: ['T1'] }, { transmitters: ['T2'] }];
  const twoTransmitters: Partial<SiteSpec> = {
    transmitters: [
      { name: 'T1', zone: 'Roof' },
      { name: 'T2', zone: 'Roof' },
    ],
  };
  return {
    seed: 23,
    since,
    organisations: [
      {
        name: 'Quarrybank Roofs',
        timeZone: 'UTC',
        phone: '',
        people: [
          { email: 'technician@quarrybank.example', name: 'Una Lathe', role: 'technician', sites: [] },
          { email: 'second@quarrybank.example', name: 'Ivo Brandt', role: 'technician', sites: [] },
        ],
        moduleTypes: MODULE_TYPES,
        unitTypes: UNIT_TYPES,
        sites: [
          site('Monitored', BOTH_SIDES, [{}]),
          site('Two transmitters', ON_KEEP_ALIVE, served, twoTransmitters),
          site('Mute', SHUTDOWN_ONLY, [{ transmitters: ['T1'] }], {
            transmitters: [{ name: 'T1', zone: 'Roof' }],
          }),
        ],
      },
    ],
  };
}

export const planOf = (strings: string[], more: Partial<TestPlan> = {}): TestPlan => ({
  onSite: 'Una Lathe',
  operator: 'Ivo Brandt',
  others: '',
  strings,
  rounds: [null],
  light: 'bright',
  weather: 'clear',
  instrument: {
    name: 'Hawkbill 15',
    serial: 'HB-20881',
    category: 'CAT III',
    ratedV: 1500,
    calibratedOn: '2026-05-04',
    provedBefore: true,
  },
  ...more,
});

export const sent = (act: Act, at: Date): SentAct => ({ id: randomUUID(), at: at.toISOString(), act });
