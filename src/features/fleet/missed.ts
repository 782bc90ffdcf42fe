import { countAtStart } from '../../drawings/numbers';
import type { MissedItem } from '../../schemas/api/fleet';
import { fleetMissed } from '../../words/fleet';

const some = (n: number, one: string, many = `${one}s`): string =>
  `${countAtStart(n)} ${n === 1 ? one : many}`;
const times = (n: number): string => (n === 1 ? '' : n === 2 ? fleetMissed.twice : fleetMissed.nTimes(n));

/** What happened at a site while somebody was away, as half a sentence before "at Kestrel Row School". */
export function missedInWords({ kind, events, units }: MissedItem): string {
  // an event without positions still concerns at least one unit
  const n = Math.max(units, 1);
  switch (kind) {
    case 'units_not_shutting_down':
      return fleetMissed.didNotShutDown(some(n, fleetMissed.unit));
    case 'units_stuck':
      return fleetMissed.gotStuckInShutdown(some(n, fleetMissed.unit));
    case 'units_unconfirmed':
      return fleetMissed.theShutdownOfCould(some(n, fleetMissed.unit));
    case 'units_silent':
      return fleetMissed.fellSilent(some(n, fleetMissed.unit));
    case 'units_recovered':
      return fleetMissed.nRecovered(some(n, fleetMissed.unit));
    case 'string_finding':
      return fleetMissed.eventsBegan(some(events, fleetMissed.stringFinding));
    case 'string_finding_ended':
      return fleetMissed.eventsEnded(some(events, fleetMissed.stringFinding));
    case 'logger_lost':
      return fleetMissed.theLoggerStoppedReporting(times(events));
    case 'gateway_silent':
      return fleetMissed.gatewayFellSilent(times(events));
    case 'command':
      return events === 1 ? fleetMissed.aCommandCameIn : fleetMissed.commandsCameInForce(events);
    case 'roll_call_started':
      return fleetMissed.rollCallWasStarted(times(events));
    case 'roll_call_stopped':
      return fleetMissed.rollCallWasStopped(times(events));
    case 'hazard_acknowledged':
      return fleetMissed.takenOn(some(events, fleetMissed.hazardWas, fleetMissed.hazardsWere));
    default:
      return fleetMissed.cameIn(some(events, fleetMissed.event));
  }
}
