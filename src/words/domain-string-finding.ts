/** A string's finding in one sentence, by what its conductors show. */

/** V; null: it is not known any more how much. */
const measured = (voltage: number | null, sharedInput: boolean): string =>
  `${voltage === null ? 'A voltage' : `${Math.round(voltage)} V`} ${where(sharedInput)}`;
const where = (sharedInput: boolean): string =>
  sharedInput ? 'at the input that it shares' : 'on its conductors';

export const stringFindingSaid = {
  standsWhileCommanded: (voltage: number | null, sharedInput: boolean) =>
    `${measured(voltage, sharedInput)} while shutdown is commanded; which unit passes is not known`,
  /** @param range the fewest and the most units; null: not known */
  doNotPass: (range: readonly [number, number] | null, ofN: number | null, sharedInput: boolean) => {
    const count =
      range === null ? 'Some' : range[0] === range[1] ? String(range[0]) : `${range[0]} to ${range[1]}`;
    return `${count} of ${ofN ?? 'its'} units do not pass, by the voltage ${where(sharedInput)}; positions unknown`;
  },
  notExplained: (voltage: number | null, sharedInput: boolean) =>
    `${measured(voltage, sharedInput)}, which its units' own voltages do not explain`,
};
