import { causePlaces } from '../../words/domain-causes';
import type { CauseVerdict, PartKind, SiteCondition, SlotCondition, StringCondition } from './site';

/**
 * Parts that units share, and what each would look like if it had failed. Costs are −ln of probabilities: how rare a
 * failure of the part is, and how likely each of its units then shows the verdict. All from experience; they rank
 * explanations, they are no statistics of failures.
 */

/** One thing that shows, or could show, a verdict: a unit, or a whole string where positions are unknown. */
export interface Item {
  id: string;
  string: StringCondition;
  slot: SlotCondition | null;
  units: number;
  sinceS: number;
  /** Shows the verdict; `normal`: shows that it doesn't; `unknown`: says neither. */
  shows: 'abnormal' | 'normal' | 'unknown';
}

export type Mode =
  | 'unit'
  | 'string'
  | 'weak_signal'
  | 'transmitter_lost'
  | 'transmitter_on'
  | 'cross_talk'
  | 'gateway'
  | 'logger'
  | 'input'
  | 'inverter'
  | 'zone'
  | 'site'
  | 'tells_nothing'
  | 'night'
  | 'not_heard_yet';

export interface Candidate {
  mode: Mode;
  part: { kind: PartKind; name: string };
  members: Item[];
  /** −ln of how likely this part is to have failed so. */
  rarity: number;
  /** −ln of how likely a member then shows the verdict, and doesn't. */
  shows: number;
  spares: number;
}

/** −ln(1/1000): one unit on its own. */
export const UNIT_RARITY = 6.9;
const ALL = { shows: 0.03, spares: 3.5 }; // 97 of 100 members
const SOME = { shows: 0.69, spares: 0.69 }; // every other member

const grouped = (items: readonly Item[], keys: (item: Item) => readonly string[]): Map<string, Item[]> => {
  const groups = new Map<string, Item[]>();
  for (const item of items)
    for (const key of keys(item)) {
      const group = groups.get(key);
      if (group === undefined) groups.set(key, [item]);
      else group.push(item);
    }
  return groups;
};

/** Groups of which half or more say something: of a zone in the dark two that are seen are not all of it. */
const mostlyTold = (groups: Map<string, Item[]>): Map<string, Item[]> =>
  new Map([...groups].filter(([, of]) => 2 * of.filter((i) => i.shows !== 'unknown').length >= of.length));

/** Every part that could stand behind `verdict` at this site, with the units that hang from it. */
export function candidatesFor(
  verdict: CauseVerdict,
  site: SiteCondition,
  items: readonly Item[],
): Candidate[] {
  const found: Candidate[] = [];
  const add = (
    mode: Mode,
    kind: PartKind,
    groups: Map<string, Item[]>,
    rarity: number | ((name: string) => number | null),
    share: typeof ALL,
  ): void => {
    for (const [name, members] of groups) {
      const cost = typeof rarity === 'number' ? rarity : rarity(name);
      if (cost !== null && members.some((m) => m.shows === 'abnormal'))
        found.push({ mode, part: { kind, name }, members, rarity: cost, ...share });
    }
  };
  const keepAlive = items.filter((i) => i.string.releasedBy === 'keep_alive');
  const byString = grouped(items, (i) => [i.string.name]);
  const byZone = grouped(items, (i) => [i.string.zone]);
  const byLogger = grouped(items, (i) => (i.string.logger === null ? [] : [i.string.logger]));
  const byGateway = grouped(items, (i) => (i.slot?.gateway == null ? [] : [i.slot.gateway]));
  const byTransmitter = grouped(keepAlive, (i) => i.string.transmitters);
  const byInverter = grouped(items, (i) => [i.string.inverter]);

  if (verdict === 'stuck') {
    add('string', 'string', byString, 9, ALL);
    add(
      'weak_signal',
      'string',
      grouped(keepAlive, (i) => [i.string.name]),
      9.5,
      SOME,
    );
    // a string that hears a second transmitter that works would be released
    const alone = grouped(
      keepAlive.filter((i) => i.string.transmitters.length === 1),
      (i) => i.string.transmitters,
    );
    add('transmitter_lost', 'transmitter', alone, 7.5, ALL);
    add('weak_signal', 'transmitter', byTransmitter, 10.5, SOME);
    const byLoggerOnly = items.filter((i) => i.string.releasedBy === 'logger');
    add(
      'gateway',
      'gateway',
      grouped(byLoggerOnly, (i) => (i.slot?.gateway == null ? [] : [i.slot.gateway])),
      8.5,
      ALL,
    );
    add('zone', 'zone', byZone, 8.5, ALL);
    add('inverter', 'inverter', byInverter, 11, ALL);
  } else if (verdict === 'not_shutting_down') {
    add('string', 'string', mostlyTold(byString), 10, ALL);
    add('transmitter_on', 'transmitter', mostlyTold(byTransmitter), 8, ALL);
    const sendsStill = site.transmitters.filter(
      (t) => t.inForce === 'released' && zoneReleased(site, t.zone),
    );
    for (const neighbour of sendsStill)
      for (const [, members] of mostlyTold(
        grouped(
          keepAlive.filter((i) => !i.string.transmitters.includes(neighbour.name)),
          (i) => [i.string.name],
        ),
      ))
        if (members.some((m) => m.shows === 'abnormal'))
          found.push({
            mode: 'cross_talk',
            part: { kind: 'transmitter', name: neighbour.name },
            members,
            rarity: 6.5 + Math.log(sendsStill.length),
            ...ALL,
          });
    add('gateway', 'gateway', mostlyTold(byGateway), 9.5, ALL);
    add('zone', 'zone', mostlyTold(byZone), 8.5, ALL);
    add('logger', 'logger', mostlyTold(byLogger), 10, ALL);
    add(
      'input',
      'input',
      grouped(
        items.filter((i) => i.slot === null),
        (i) => [inputName(i.string.inverter, i.string.input)],
      ),
      7.5,
      ALL,
    );
  } else {
    // what is dark, unheard or tells nothing has its reason; a lost radio path explains only what fell silent
    const reporting = items.filter(
      (i) =>
        i.slot !== null && i.slot.state !== null && i.slot.state !== 'dark' && i.slot.state !== 'unheard',
    );
    const by = (key: (i: Item) => string | null): Map<string, Item[]> =>
      grouped(reporting, (i) => {
        const name = key(i);
        return name === null ? [] : [name];
      });
    const gateways = by((i) => i.slot?.gateway ?? null);
    const loggers = by((i) => i.string.logger);
    add('gateway', 'gateway', gateways, (name) => (gatewayHeardLately(site, name) ? null : 5), ALL);
    add('logger', 'logger', loggers, (name) => (loggerConnected(site, name) ? 9 : 2), ALL);
    add(
      'string',
      'string',
      by((i) => i.string.name),
      9.5,
      ALL,
    );
    add(
      'inverter',
      'inverter',
      by((i) => i.string.inverter),
      11.5,
      ALL,
    );
    if (site.loggers.length > 1) add('site', 'site', new Map([[site.name, reporting]]), 9.5, ALL);
    if (verdict === 'unconfirmed') {
      const told = items.filter((i) => i.slot === null || i.slot.state === null);
      add(
        'tells_nothing',
        'zone',
        grouped(told, (i) => [i.string.zone]),
        0.5,
        ALL,
      );
      const dark = items.filter((i) => i.slot?.state === 'dark');
      add(
        'night',
        'zone',
        grouped(dark, (i) => [i.string.zone]),
        0.5,
        ALL,
      );
      const unheard = items.filter((i) => i.slot?.state === 'unheard');
      add(
        'not_heard_yet',
        'zone',
        grouped(unheard, (i) => [i.string.zone]),
        0.5,
        ALL,
      );
    }
  }
  return merged(found);
}

/** Candidates of one mode and part become one: a neighbour's transmitter may be heard by several strings. */
function merged(candidates: Candidate[]): Candidate[] {
  const byKey = new Map<string, Candidate>();
  const out: Candidate[] = [];
  for (const c of candidates) {
    if (c.mode !== 'cross_talk' || !c.members.every((m) => m.shows !== 'normal')) {
      out.push(c);
      continue;
    }
    const known = byKey.get(c.part.name);
    if (known === undefined) {
      const first = { ...c, members: [...c.members] };
      byKey.set(c.part.name, first);
      out.push(first);
    } else known.members.push(...c.members);
  }
  return out;
}

export const inputName = causePlaces.input;

const zoneReleased = (site: SiteCondition, zone: string): boolean => {
  const inForce = site.zones.find((z) => z.name === zone)?.inForce ?? null;
  return inForce === null || inForce === 'released';
};

/** A gateway that somebody was heard through within three report intervals isn't dead. */
const gatewayHeardLately = (site: SiteCondition, name: string): boolean => {
  const heard = site.gateways.find((g) => g.name === name)?.lastHeardS ?? null;
  return heard !== null && site.atS - heard < 3 * site.reportIntervalS;
};
const loggerConnected = (site: SiteCondition, name: string): boolean =>
  site.loggers.find((l) => l.name === name)?.connected ?? false;
