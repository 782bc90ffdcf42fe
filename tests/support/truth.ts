import type { SiteTruth, UnitTruth } from '../../simulator/truth';
import type { FleetPlan, SitePlan } from '../../simulator/plant/plan';
import {
  BOTH_SIDES,
  HOLDING,
  MODULE_TYPES,
  MONO_430,
  ON_KEEP_ALIVE,
  OPTIMIZING,
  SHUTDOWN_ONLY,
  UNIT_TYPES,
} from '../../simulator/scenarios/catalogue';
import { layOut, type Block, type SiteSpec } from '../../simulator/scenarios/lay-out';
import { PLACES, placeAtHour } from '../../simulator/scenarios/places';
import type { UnitState, Verdict } from '../../src/domain/verdicts/codes';

/** Small sites of every kind of unit, for holding Wakeline's conclusions against the simulator's truth. */

export type TruthKind =
  'Monitored' | 'Holding' | 'Keep-alive' | 'Shutdown-only' | 'Optimizing' | 'Commissioning';
export interface TruthSite {
  name: string;
  kind: TruthKind;
}

export const INTERVAL_S = 30;
const plane = { name: 'Roof', surfaceTilt: 10, surfaceAzimuth: 180, albedo: 0.2 };
const climate = { clearShare: 1, cloudyShare: 0, fairToday: true };

/** A fleet of these sites, where it is morning: the light outlasts a test's hours. */
export function truthFleet(since: number, sites: readonly TruthSite[]): FleetPlan {
  const place = placeAtHour([...PLACES], since, 9.5);
  const site = (
    { name }: TruthSite,
    unitType: string,
    blocks: Partial<Block>[],
    more: Partial<SiteSpec> = {},
  ): SitePlan => {
    return layOut(
      {
        name,
        switchedOnOn: more.stage === 'commissioning' ? null : '2025-03-03',
        shutdownSwitchPlace: '',
        contactName: '',
        contactPhone: '',
        reportIntervalS: INTERVAL_S,
        moduleType: MONO_430,
        unitType,
        planes: [plane],
        initiators: [{ name: 'Initiator', place: '' }],
        zones: [{ name: 'Roof', initiator: 'Initiator' }],
        gatewayNames: ['Gateway 1', 'Gateway 2'],
        climate,
        blocks: blocks.map((b, i) => ({
          name: 'AB'[i] ?? 'C',
          strings: 2,
          units: 10,
          plane: 'Roof',
          zone: 'Roof',
          gateways: i + 1,
          ...b,
        })),
        ...more,
      },
      place,
      { modules: MODULE_TYPES, units: UNIT_TYPES },
    );
  };
  const twoZones: Partial<SiteSpec> = {
    initiators: [
      { name: 'Initiator', place: '' },
      { name: 'Other initiator', place: '' },
    ],
    zones: [
      { name: 'Roof', initiator: 'Initiator' },
      { name: 'Other roof', initiator: 'Other initiator' },
    ],
    transmitters: [
      { name: 'T1', zone: 'Roof' },
      { name: 'T2', zone: 'Other roof' },
    ],
  };
  const served: Partial<Block>[] = [{ transmitters: ['T1'] }, { transmitters: ['T2'], zone: 'Other roof' }];
  const ofKind: Record<TruthKind, (site: TruthSite) => SitePlan> = {
    Monitored: (s) => site(s, BOTH_SIDES, [{}, {}]),
    Holding: (s) => site(s, HOLDING, [{}, {}]),
    'Keep-alive': (s) => site(s, ON_KEEP_ALIVE, served, twoZones),
    'Shutdown-only': (s) => site(s, SHUTDOWN_ONLY, served, twoZones),
    Optimizing: (s) => site(s, OPTIMIZING, [{}]),
    Commissioning: (s) => site(s, BOTH_SIDES, [{}], { stage: 'commissioning' }),
  };
  return {
    seed: 11,
    since,
    organisations: [
      {
        name: 'Truth and Sons',
        timeZone: 'UTC',
        phone: '',
        people: [{ email: 'technician@truth.example', name: 'Una Lathe', role: 'technician', sites: [] }],
        moduleTypes: MODULE_TYPES,
        unitTypes: UNIT_TYPES,
        sites: sites.map((s) => ofKind[s.kind](s)),
      },
    ],
  };
}

/** What may be concluded of a unit: its state (null: nothing to say) and the verdicts that are right. */
export interface Right {
  states: (UnitState | null)[];
  verdicts: Verdict[];
}

/**
 * What Wakeline ought to say of a unit, from what is true of it and of what it can know. `silent` units are those of
 * which nothing is heard, for a fault of the radio.
 */
export function rightFor(site: SitePlan, truth: SiteTruth, unit: UnitTruth, silent: boolean): Right {
  const drawn = site.strings.find((s) => s.name === unit.string);
  const released =
    truth.zones.find((z) => z.name === drawn?.zone)?.inForce === 'released' &&
    (drawn?.transmitters.length === 0 ||
      drawn?.transmitters.some((t) => truth.transmitters.find((x) => x.name === t)?.inForce === 'released'));
  const unknown: Verdict[] = released ? ['ok'] : ['unconfirmed'];
  if (drawn?.kind === 'shutdown_only') return { states: [null], verdicts: unknown };
  if (!unit.heard) return { states: ['unheard'], verdicts: unknown };
  if (unit.mode === 'unpowered') return { states: ['dark', 'silent'], verdicts: unknown };
  if (silent) return { states: ['silent'], verdicts: unknown };
  if (unit.mode === 'passing')
    return { states: ['passing'], verdicts: released ? ['ok'] : ['not_shutting_down'] };
  return { states: ['shutdown'], verdicts: released ? ['stuck'] : ['ok'] };
}
