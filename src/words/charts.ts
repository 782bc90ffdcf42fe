import { number, percent, quantity } from '../drawings/numbers';
import { clock, fullTime } from '../drawings/times';

export const chartCsvHeads = {
  time: 'time (UTC)',
  line: (name: string, unit: string) => `${name} (${unit})`,
  bandFrom: (name: string, unit: string) => `${name} from (${unit})`,
  bandTo: (name: string, unit: string) => `${name} to (${unit})`,
};

export const chartLegend = {
  lines: 'Lines',
};

export const chartTable = {
  nothingWasReportedIn: 'Nothing was reported in this time.',
  modelFigures: (model: string) => `${model}, figures`,
  time: 'Time',
  lowToDigits: (low: number, digits: number, high: number) =>
    `${number(low, digits)} to ${number(high, digits)}`,
};

export const heatStrip = {
  nothingReported: 'nothing reported',
  ofTheStringsMiddle: (ratio: number) => `, ${percent(ratio)} of the string’s middle`,
  atPositionValue: (at: number, timeZone: string, position: number, value: string, share: string) =>
    `${clock(at * 1000, timeZone)}, position ${position}: ${value}${share}`,
  orLess: (ratioSpan: number) => `−${percent(ratioSpan)} or less`,
  asTheMiddle: 'as the middle',
  modelFigures: (model: string) => `${model}, figures`,
  time: 'Time',
  arrowKeysMoveFrom: (model: string) =>
    `${model}. Arrow keys move from cell to cell, Enter shows the staircase of that moment, t the figures as a table.`,
  strip: 'Strip',
  table: 'Table',
  pointAtACell: 'Point at a cell, or move with the arrow keys.',
};

export const timeChart = {
  pressForTheFigures: (model: string, onMoment: string) =>
    `${model}. Press t for the figures as a table, left and right for single values${onMoment}.`,
  zoomIn: 'Zoom in',
  zoomOut: 'Zoom out',
  whole: 'Whole',
  curve: 'Curve',
  table: 'Table',
  png: 'PNG',
  enterForTheStaircase: ', Enter for the staircase of that moment',
};

export const chartsOptions = {
  nothingReported: 'nothing reported',
  lowToDigits: (low: number, digits: number, high: number, unit: string) =>
    `${quantity(low, '', digits).trim()} to ${quantity(high, unit, digits)}`,
};

export const chartsPicture = {
  fromToTimeZone: (from: number, timeZone: string, to: number) =>
    `${fullTime(from * 1000, timeZone)} to ${fullTime(to * 1000, timeZone)}`,
};
