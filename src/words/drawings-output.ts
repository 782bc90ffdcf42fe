import { percent } from '../drawings/numbers';

export const dayCalendar = {
  mon: 'Mon',
  tue: 'Tue',
  wed: 'Wed',
  thu: 'Thu',
  fri: 'Fri',
  sat: 'Sat',
  sun: 'Sun',
};

export const dayRatios = {
  madeOfWhatWas: (map: string, limit: number) =>
    `Made of what was expected: ${map}. Low below ${percent(limit)}.`,
  low: ', low',
};
