import { countAtStart } from '../../drawings/numbers';
import type { MissedItem } from '../../schemas/api/fleet';

const some = (n: number, one: string, many = `${one}s`): string =>
  `${countAtStart(n)} ${n === 1 ? one : many}`;
const times = (n: number): string =>
  n === 1 ? '' : n === 2 ? ', twice' : `, ${countAtStart(n).toLowerCase()} times`;

/** What happened at a site while somebody was away, as half a sentence before "at Kestrel Row School". */
export function missedInWords({ kind, events, units }: MissedItem): string {
  // an event without positions still concerns at least one unit
  const n = Math.max(units, 1);
  switch (kind) {
    case 'units_not_shutting_down':
      return `${some(n, 'unit')} did not shut down`;
    case 'units_stuck':
      return `${some(n, 'unit')} got stuck in shutdown`;
    case 'units_unconfirmed':
      return `The shutdown of ${some(n, 'unit').toLowerCase()} could not be confirmed`;
    case 'units_silent':
      return `${some(n, 'unit')} fell silent`;
    case 'units_recovered':
      return `${some(n, 'unit')} recovered`;
    case 'string_finding':
      return `${some(events, 'string finding')} began`;
    case 'string_finding_ended':
      return `${some(events, 'string finding')} ended`;
    case 'logger_lost':
      return `The logger stopped reporting${times(events)}`;
    case 'gateway_silent':
      return `A gateway fell silent${times(events)}`;
    case 'command':
      return events === 1 ? 'A command came in force' : `${countAtStart(events)} commands came in force`;
    case 'roll_call_started':
      return `A roll call was started${times(events)}`;
    case 'roll_call_stopped':
      return `A roll call was stopped${times(events)}`;
    case 'hazard_acknowledged':
      return `${some(events, 'hazard was', 'hazards were')} taken on`;
    default:
      return `${some(events, 'event')} came in`;
  }
}
