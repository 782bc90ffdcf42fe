import type { InForce } from '../../src/domain/verdicts/codes';
import { ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import type { SitePlan } from './plan';

/** What holds in a zone or at a transmitter. */
export interface CommandNow {
  inForce: InForce;
  /** Epoch seconds. */
  since: number;
  by: string;
}
export interface Initiator {
  open: boolean;
  since: number;
  by: string;
}

/** When a site was released for the first time: nine o'clock (UTC) of its first day, or an hour before the fleet began. */
export const firstReleasedS = (plan: SitePlan, since: number): number =>
  plan.switchedOnOn === null ? since - 3600 : Date.parse(plan.switchedOnOn) / 1000 + 9 * 3600;

/** Initiators, zones and transmitters: what is commanded where. */
export class Commands {
  readonly initiators = new Map<string, Initiator>();
  readonly zones = new Map<string, CommandNow>();
  readonly transmitters = new Map<string, CommandNow>();
  /** Counts changes, so that others see them. */
  version = 0;

  /** @param since epoch seconds for which the fleet was laid out */
  constructor(
    private readonly plan: SitePlan,
    since: number,
  ) {
    const fromS = firstReleasedS(plan, since);
    for (const i of plan.initiators) this.initiators.set(i.name, { open: false, since: fromS, by: i.name });
    for (const z of plan.zones)
      this.zones.set(z.name, { inForce: 'released', since: fromS, by: z.initiator });
    for (const t of plan.transmitters)
      this.transmitters.set(t.name, { inForce: 'released', since: fromS, by: t.name });
  }

  /** False when the site has no initiator of that name. */
  setInitiator(name: string, open: boolean, atS: number, by = name): boolean {
    const initiator = this.initiators.get(name);
    if (!initiator) return false;
    if (initiator.open !== open) Object.assign(initiator, { open, since: atS, by });
    return true;
  }

  /** Follows initiators and faults; true when something in force has changed. */
  refresh(faults: readonly Fault[], atS: number): boolean {
    const before = this.version;
    const lost = ofKind(faults, 'command_lost');
    for (const zone of this.plan.zones) {
      const initiator = this.initiators.get(zone.initiator);
      const fault = lost.find((f) => f.zone === zone.name);
      const inForce = initiator?.open ? 'initiator' : (fault?.how ?? 'released');
      this.put(this.zones, zone.name, inForce, initiator?.open ? initiator.since : atS, initiator?.by ?? '');
    }
    const off = ofKind(faults, 'transmitter_off');
    for (const t of this.plan.transmitters) {
      const zone = this.zones.get(t.zone);
      const stopped = off.some((f) => f.transmitter === t.name);
      const inForce = stopped ? 'keep_alive_lost' : (zone?.inForce ?? 'released');
      // Running again after a stop of its own, it runs from now, not since its zone was released.
      const known = this.transmitters.get(t.name)?.since ?? 0;
      const since = !stopped && zone && zone.since > known ? zone.since : atS;
      this.put(this.transmitters, t.name, inForce, since, stopped ? t.name : (zone?.by ?? t.name));
    }
    return this.version !== before;
  }

  private put(map: Map<string, CommandNow>, name: string, inForce: InForce, since: number, by: string): void {
    if (map.get(name)?.inForce === inForce) return;
    map.set(name, { inForce, since, by });
    this.version += 1;
  }

  transmits(transmitter: string): boolean {
    return this.transmitters.get(transmitter)?.inForce === 'released';
  }

  released(zone: string): boolean {
    return this.zones.get(zone)?.inForce === 'released';
  }
}
