import type { RuleSet } from '../domain/verdicts/context';
import type { Verdict } from '../domain/verdicts/codes';

/** Where the time limit of a rule set comes from. */
export const timeLimitSources: Record<RuleSet, string> = {
  rapid_shutdown_10s: 'NEC 690.12, 2014 edition: 10 s',
  rapid_shutdown_30s: 'NEC 690.12(B), 2017 and later editions: 30 s',
  hazard_control: 'no time limit applies to this site; 30 s taken as a yardstick',
  none: 'no time limit applies to this site; 30 s taken as a yardstick',
};

/** What a unit with a verdict could be besides what is said of it. */
export const verdictCouldBe: Partial<Record<Verdict, string[]>> = {
  stuck: [
    'the unit does not hear the keep-alive or the release',
    'its transmitter is off or too weak there',
    'the unit is defective',
    'the command in force was reported wrongly',
  ],
  not_shutting_down: [
    'the unit hears a keep-alive from a neighbouring transmitter',
    'the unit is defective',
    'the command in force was reported wrongly',
  ],
  unconfirmed: ['it followed and can not say so', 'it did not follow'],
  late: ['the command reached it late', 'its report reached the logger late'],
  flapping: ['a keep-alive at the edge of hearing', 'a loose connector', 'passing clouds on a weak module'],
};
export const evidenceSaid = { grace: 'grace, a setting' };

/** Thresholds of a string's voltage, and what else it could be that passes them. */
export const conductorsSaid = {
  outsideArray: 'NEC 690.12(B)(1): 30 V outside the array boundary',
  twiceShutdown: 'twice the highest shutdown voltage of all its units',
  afterShutdownCouldBe: [
    "the inverter's capacitors hold the home run up longer than assumed",
    'another source feeds this input',
    'the wiring differs from the as-built',
  ],
  flowingCouldBe: ['another source feeds this input', 'the wiring differs from the as-built'],
  twoThirds: 'two thirds of a module or 3.5 standard deviations of the two measurements',
  twoThirdsOfClaims:
    'two thirds of a module or 3.5 standard deviations of the two measurements; the sum is what the units claim',
  excessCouldBe: [
    'a module is wired in without its unit: the string can not shut down fully',
    'the string has more modules than the as-built says',
    'the string sits on another input',
  ],
  claimsToPass: 'a unit that claims to pass does not',
  lackCouldBe: [
    'an open connector or fuse: the string is not on this input',
    'resistance in the home run',
    'the string sits on another input',
  ],
  sixTenths: (deviations: number) =>
    `six tenths of a module or ${deviations} standard deviations of the expected voltage`,
  allHeldCouldBe: ['no keep-alive reaches the string', 'an open connector or fuse', 'snow on the modules'],
  someHeldCouldBe: [
    'modules bypassed by shade or a failed diode',
    'fewer modules than the as-built says',
    'units left unplugged',
  ],
};
