/** What kinds of cause are called where energy is told apart by them; kinds as in the table of causes. */
export const LOSS_WORDS: Readonly<Record<string, string>> = {
  stuck: 'Units stuck in shutdown',
  not_shutting_down: 'Units that did not shut down',
  unconfirmed: 'Shutdown unconfirmed',
  silent: 'Silent units',
  low_output: 'Strings that make too little',
  bypassed_substring: 'Bypassed sub-strings',
  weak_unit: 'Weak modules',
  loop_resistance: 'Resistance in a string',
  wrong_string: 'Units in another string',
};
