import type { ModuleType } from '../../domain/equipment/module-type';
import { UNIT_KINDS, UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { expectedBand, expectedModule } from '../../domain/output/expected';
import { yields } from '../../domain/output/yields';
import { vocOf } from '../../domain/photovoltaics/module/datasheet';
import { interpretReading } from '../../domain/readings/interpret';
import { ORDINARY_METER } from '../../domain/readings/reading';
import { number, percent, quantity } from '../../drawings/numbers';
import type { Example } from './example';

/** A typical module of no maker in particular. */
export const MODULE: ModuleType = {
  name: 'typical, 108 half cells',
  vocRef: 37.3,
  iscRef: 13.9,
  vmpRef: 31.2,
  impRef: 13.15,
  betaVoc: -0.0027,
  alphaIsc: 0.00048,
  gammaPmp: -0.0034,
  cellsInSeries: 54,
  bypassGroups: 3,
  noct: 44,
};

const span = (from: number, to: number, digits = 0): string =>
  `${number(from, digits)} to ${quantity(to, 'V', digits)}`;

export const readingExample: Example = {
  inputs: [
    {
      kind: 'choice',
      key: 'kind',
      label: 'Kind of unit',
      options: [
        { value: 'shutdown_only', label: 'shutdown-only' },
        { value: 'monitored', label: 'monitored' },
        { value: 'optimizing', label: 'optimizing' },
      ],
      start: 'shutdown_only',
    },
    { kind: 'number', key: 'units', label: 'Units', min: 1, max: 63, whole: true, start: 14 },
    { kind: 'number', key: 'volts', label: 'Reading', unit: 'V', min: -2000, max: 2000, start: 7.8 },
    {
      kind: 'number',
      key: 'sibling',
      label: 'A like string reads',
      unit: 'V',
      min: -2000,
      max: 2000,
      start: 8.4,
    },
  ],
  answer: ({ number: n, choice }) => {
    const units = n('units');
    const kind = UNIT_KINDS.find((k) => k === choice('kind')) ?? 'shutdown_only';
    const answer = interpretReading({
      units,
      unitType: UNIT_PRESETS[kind],
      module: MODULE,
      commanded: 'shutdown',
      heard: 0,
      light: 'bright',
      conditions: null,
      meter: ORDINARY_METER,
      voltageV: n('volts'),
      siblings: [{ units, voltageV: n('sibling') }],
      earth: null,
    });
    return {
      finding: answer.headline,
      figures: answer.likely.slice(0, 4).map((h) => ({
        label: h.words,
        value: percent(Math.min(0.99, h.probability)),
      })),
    };
  },
};

export const expectedExample: Example = {
  inputs: [
    { kind: 'number', key: 'units', label: 'Passing units', min: 1, max: 63, whole: true, start: 14 },
    { kind: 'number', key: 'poa', label: 'Light on the plane', unit: 'W/m²', min: 30, max: 1500, start: 650 },
    { kind: 'number', key: 'cell', label: 'Cell temperature', unit: '°C', min: -40, max: 100, start: 38 },
    {
      kind: 'choice',
      key: 'load',
      label: 'String current',
      options: [
        { value: 'open', label: 'open circuit' },
        { value: 'load', label: 'under load' },
      ],
      start: 'open',
    },
  ],
  answer: ({ number: n, choice }) => {
    const units = n('units');
    const expected = expectedModule({
      module: MODULE,
      underLoad: choice('load') === 'load',
      otherStrings: [],
      ownUnits: [],
      poaMeasured: n('poa'),
      poaClear: 0,
      temperatureCellMeasured: n('cell'),
      temperatureAir: null,
    });
    if (!expected) return { finding: 'Too little light to foretell a voltage.', figures: [] };
    const [low, high] = expectedBand(expected, units);
    const nominal = UNIT_PRESETS.monitored.shutdownVoltage.nominal;
    return {
      finding: `${number(units)} passing units should give ${span(low, high)}, nine times in ten`,
      figures: [
        {
          label: 'One module open circuit, by its datasheet',
          value: quantity(vocOf(MODULE, n('poa'), n('cell')), 'V', 2),
        },
        { label: 'One passing unit', value: quantity(expected.voltage, 'V', 2) },
        { label: 'Relative standard deviation of the string', value: percent(expected.relativeSd, 1) },
        { label: 'All of them in shutdown, open circuit', value: quantity(units * nominal, 'V', 1) },
      ],
    };
  },
};

export const yieldsExample: Example = {
  inputs: [
    { kind: 'number', key: 'p0', label: 'Rated power', unit: 'kW', min: 0.1, max: 10_000, start: 40 },
    {
      kind: 'number',
      key: 'energy',
      label: 'AC energy of the hour',
      unit: 'kWh',
      min: 0,
      max: 20_000,
      start: 24.6,
    },
    {
      kind: 'number',
      key: 'poa',
      label: 'Mean light in the plane',
      unit: 'W/m²',
      min: 0,
      max: 1500,
      start: 760,
    },
    { kind: 'number', key: 'module', label: 'Module temperature', unit: '°C', min: -40, max: 100, start: 47 },
  ],
  answer: ({ number: n }) => {
    const y = yields(
      [{ poaGlobal: n('poa'), temperatureModule: n('module'), powerOut: n('energy') * 1000 }],
      { p0: n('p0') * 1000, gammaPmp: MODULE.gammaPmp, intervalH: 1 },
    );
    return {
      finding:
        y.performanceRatio === null
          ? 'Without light there is no ratio'
          : `Performance ratio ${percent(y.performanceRatio, 1)}`,
      figures: [
        { label: 'Final yield Yf', value: quantity(y.finalYieldH, 'h', 3) },
        { label: 'Reference yield Yr', value: quantity(y.referenceYieldH, 'h', 3) },
        { label: 'Ratio corrected to 25 °C', value: percent(y.performanceRatioStc, 1) },
        { label: 'Completeness', value: percent(y.completeness) },
      ],
    };
  },
};
