/** What months and weeks are called. */

const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
];

/** @param month 1 … 12 */
export const monthName = (month: number): string => MONTHS[month - 1] ?? '';

export const periodLabels = {
  month: (month: number, year: number) => `${monthName(month)} ${year}`,
  /** Days of the month, and months, of its first and last day. */
  week: (fromDay: number, fromMonth: number, toDay: number, toMonth: number) =>
    `the week from ${fromDay} ${monthName(fromMonth)} to ${toDay} ${monthName(toMonth)}`,
};
