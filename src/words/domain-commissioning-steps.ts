import { counted, figure, listedUpTo } from './domain-counts';
import { isOne } from './language';

const named = (names: readonly string[], most = 4): string => listedUpTo(most, names);

/** What stands of each step, in few words, and what blocks it. */
export const commissioningStepSaid = {
  notStarted: 'not started',
  asBuilt: {
    nothing: 'nothing entered',
    whole: (slots: number, strings: number) => `${counted(slots, 'unit')}, ${counted(strings, 'string')}`,
    part: (placed: number, slots: number, strings: number) =>
      `${figure(placed)} of ${counted(slots, 'unit')}, ${counted(strings, 'string')}`,
    noString: 'No string is entered.',
    noSerial: (string: string, slots: number) => `${string}: ${counted(slots, 'slot')} without a serial.`,
    noZone: 'No zone and no initiator are entered.',
  },
  installChecks: {
    signed: (signed: number, strings: number) => `${signed} of ${counted(strings, 'string')} signed`,
    failed: (string: string, checks: readonly string[]) => `${string}: ${named(checks)} failed.`,
    stale: (string: string) => `${string} was recorded anew after it was signed: sign again.`,
    unsigned: (string: string) => `${string} is not signed off.`,
  },
  meterReadings: {
    expected: (expected: number, strings: number) => `${expected} of ${strings} as expected`,
    unread: (string: string) => `${string} has no reading.`,
    finding: (string: string) => `${string}: read, and not as expected.`,
    cant_tell: (string: string) => `${string}: read, and two explanations fit.`,
    proves_nothing: (string: string) =>
      `${string}: read without light that powers the units: proves nothing.`,
  },
  rollCall: {
    heard: (heard: number, roster: number) => `${figure(heard)} of ${figure(roster)} heard`,
    unheard: (string: string, units: number) =>
      `${string}: ${counted(units, 'unit')} not heard. Treat the string as live.`,
    unknown: (serials: number) => `${counted(serials, 'serial is', 'serials are')} heard and on no slot.`,
  },
  shutdownTest: {
    notAsked: 'none asked by the rule set',
    passed: (passed: number, zones: number) => `${passed} of ${counted(zones, 'zone')} passed`,
    underWay: (zones: readonly string[]) => `test of ${named(zones)} under way`,
    unsigned: (zone: string) => `${zone} has no signed shutdown test.`,
    unsignedStrings: (zone: string, strings: readonly string[]) =>
      `${zone}: ${named(strings)} ${isOne(strings.length) ? 'has' : 'have'} no signed shutdown test.`,
    failed: (zone: string) => `${zone} did not pass its shutdown test.`,
    consistent: (zone: string) =>
      `${zone} was not measured: what its units report agrees, and no instrument has witnessed it.`,
    not_witnessed: (zone: string) => `${zone} was not witnessed in its shutdown test.`,
  },
  handover: {
    notMade: 'not made',
    version: (packs: number) => `version ${packs}`,
  },
};
