import type { ModuleType } from '../../domain/equipment/module-type';
import { UNIT_KINDS, UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { expectedBand, expectedModule } from '../../domain/output/expected';
import { yields } from '../../domain/output/yields';
import { vocOf } from '../../domain/photovoltaics/module/open-circuit';
import { interpretReading } from '../../domain/readings/interpret';
import { ORDINARY_METER } from '../../domain/readings/reading';
import { percent, quantity } from '../../drawings/numbers';
import type { Example } from './example';
import { examplesElectrical } from '../../words/method-examples';

/** A typical module of no maker in particular. */
export const MODULE: ModuleType = {
  name: examplesElectrical.typical108HalfCells,
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
  examplesElectrical.fromToDigits(from, digits, to);

export const readingExample: Example = {
  inputs: [
    {
      kind: 'choice',
      key: 'kind',
      label: examplesElectrical.kindOfUnit,
      options: [
        { value: 'shutdown_only', label: examplesElectrical.shutdownOnly },
        { value: 'monitored', label: examplesElectrical.monitored },
        { value: 'optimizing', label: examplesElectrical.optimizing },
      ],
      start: 'shutdown_only',
    },
    {
      kind: 'number',
      key: 'units',
      label: examplesElectrical.units,
      min: 1,
      max: 63,
      whole: true,
      start: 14,
    },
    {
      kind: 'number',
      key: 'volts',
      label: examplesElectrical.reading,
      unit: 'V',
      min: -2000,
      max: 2000,
      start: 7.8,
    },
    {
      kind: 'number',
      key: 'sibling',
      label: examplesElectrical.aLikeStringReads,
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
    {
      kind: 'number',
      key: 'units',
      label: examplesElectrical.passingUnits,
      min: 1,
      max: 63,
      whole: true,
      start: 14,
    },
    {
      kind: 'number',
      key: 'poa',
      label: examplesElectrical.lightOnThePlane,
      unit: 'W/m²',
      min: 30,
      max: 1500,
      start: 650,
    },
    {
      kind: 'number',
      key: 'cell',
      label: examplesElectrical.cellTemperature,
      unit: '°C',
      min: -40,
      max: 100,
      start: 38,
    },
    {
      kind: 'choice',
      key: 'load',
      label: examplesElectrical.stringCurrent,
      options: [
        { value: 'open', label: examplesElectrical.openCircuit },
        { value: 'load', label: examplesElectrical.underLoad },
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
    if (!expected) return { finding: examplesElectrical.tooLittleLightTo, figures: [] };
    const [low, high] = expectedBand(expected, units);
    const nominal = UNIT_PRESETS.monitored.shutdownVoltage.nominal;
    return {
      finding: examplesElectrical.passingUnitsShouldGive(units, span(low, high)),
      figures: [
        {
          label: examplesElectrical.oneModuleOpenCircuit,
          value: quantity(vocOf(MODULE, n('poa'), n('cell')), 'V', 2),
        },
        { label: examplesElectrical.onePassingUnit, value: quantity(expected.voltage, 'V', 2) },
        { label: examplesElectrical.relativeStandardDeviationOf, value: percent(expected.relativeSd, 1) },
        { label: examplesElectrical.allOfThemIn, value: quantity(units * nominal, 'V', 1) },
      ],
    };
  },
};

export const yieldsExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'p0',
      label: examplesElectrical.ratedPower,
      unit: 'kW',
      min: 0.1,
      max: 10_000,
      start: 40,
    },
    {
      kind: 'number',
      key: 'energy',
      label: examplesElectrical.acEnergyOfThe,
      unit: 'kWh',
      min: 0,
      max: 20_000,
      start: 24.6,
    },
    {
      kind: 'number',
      key: 'poa',
      label: examplesElectrical.meanLightInThe,
      unit: 'W/m²',
      min: 0,
      max: 1500,
      start: 760,
    },
    {
      kind: 'number',
      key: 'module',
      label: examplesElectrical.moduleTemperature,
      unit: '°C',
      min: -40,
      max: 100,
      start: 47,
    },
  ],
  answer: ({ number: n }) => {
    const y = yields(
      [{ poaGlobal: n('poa'), temperatureModule: n('module'), powerOut: n('energy') * 1000 }],
      { p0: n('p0') * 1000, gammaPmp: MODULE.gammaPmp, intervalH: 1 },
    );
    return {
      finding:
        y.performanceRatio === null
          ? examplesElectrical.withoutLightThereIs
          : examplesElectrical.performanceRatio(y.performanceRatio),
      figures: [
        { label: examplesElectrical.finalYieldYf, value: quantity(y.finalYieldH, 'h', 3) },
        { label: examplesElectrical.referenceYieldYr, value: quantity(y.referenceYieldH, 'h', 3) },
        { label: examplesElectrical.ratioCorrectedTo25, value: percent(y.performanceRatioStc, 1) },
        { label: examplesElectrical.completeness, value: percent(y.completeness) },
      ],
    };
  },
};
