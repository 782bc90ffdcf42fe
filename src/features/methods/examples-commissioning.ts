import { forecastRollCall } from '../../domain/commissioning/roll-call';
import { judgeShutdownTest, type ShutdownTestInput } from '../../domain/commissioning/shutdown-test';
import { judgeOutput } from '../../domain/output/low-output';
import { planeReference, type PlaneSeries, type StringSeries } from '../../domain/output/plane-reference';
import { timeLimitOf } from '../../domain/verdicts/context';
import { number, percent, quantity } from '../../drawings/numbers';
import type { Example } from './example';
import { MODULE } from './examples-electrical';
import { examplesCommissioning } from '../../words/method-examples';

const START = 1_700_000_000;

export const rollCallExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'units',
      label: examplesCommissioning.unitsOnTheRoster,
      min: 5,
      max: 600,
      whole: true,
      start: 184,
    },
    {
      kind: 'number',
      key: 'heard',
      label: examplesCommissioning.heardUntilNow,
      min: 0,
      max: 600,
      whole: true,
      start: 120,
    },
    {
      kind: 'number',
      key: 'minutes',
      label: examplesCommissioning.sinceTheStart,
      unit: 'min',
      min: 1,
      max: 1440,
      start: 20,
    },
  ],
  answer: ({ number: n }) => {
    const units = n('units');
    const heard = Math.min(units, n('heard'));
    const elapsed = n('minutes') * 60;
    const rate = -Math.log(1 - heard / (units + 1)) / elapsed; // heard as if each answered at this rate
    const forecast = forecastRollCall({
      startedAtS: START,
      nowS: START + elapsed,
      units: Array.from({ length: units }, (_, i) => ({
        group: examplesCommissioning.stringI(i, Math.max(1, Math.round(units / 12))),
        gateway: null,
        heardAtS:
          i < heard
            ? START + Math.min(elapsed, -Math.log(1 - (i + 0.5) / (units + 1)) / Math.max(rate, 1e-9))
            : null,
      })),
    });
    const minutes = forecast.expectedByS === null ? null : (forecast.expectedByS - START - elapsed) / 60;
    return {
      finding:
        forecast.curve.length === 0
          ? examplesCommissioning.tooFewHaveAnswered
          : examplesCommissioning.ofAreExpectedTo(forecast.expectedTotal, units),
      figures: [
        {
          label: examplesCommissioning.middle90,
          value: examplesCommissioning.lowToHigh(forecast.low, forecast.high),
        },
        {
          label: examplesCommissioning.mostOfThemWithin,
          value: minutes === null ? examplesCommissioning.cantTell : quantity(minutes, 'min'),
        },
        { label: examplesCommissioning.leftOutInStrings, value: number(forecast.excluded) },
      ],
    };
  },
};

const LIGHTS = ['bright', 'dull', 'snow', 'night'] as const;
export const shutdownTestExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'before',
      label: examplesCommissioning.beforeTheCommand,
      unit: 'V',
      min: 0,
      max: 1500,
      start: 520,
    },
    {
      kind: 'number',
      key: 'after',
      label: examplesCommissioning.highestOfThreeReadings,
      unit: 'V',
      min: 0,
      max: 1500,
      start: 8.4,
    },
    {
      kind: 'number',
      key: 'seconds',
      label: examplesCommissioning.readAfter,
      unit: 's',
      min: 0,
      max: 600,
      start: 25,
    },
    {
      kind: 'choice',
      key: 'instrument',
      label: examplesCommissioning.readBy,
      options: [
        { value: 'rated', label: examplesCommissioning.ratedInstrumentInverterEnd },
        { value: 'none', label: examplesCommissioning.reportsOnly },
      ],
      start: 'rated',
    },
    {
      kind: 'choice',
      key: 'light',
      label: examplesCommissioning.light,
      options: LIGHTS.map((value) => ({ value, label: value })),
      start: 'bright',
    },
  ],
  answer: ({ number: n, choice }) => {
    const { timeLimitS } = timeLimitOf('rapid_shutdown_30s');
    const rated = choice('instrument') === 'rated';
    const volts = n('after');
    const input: ShutdownTestInput = {
      ruleSet: 'rapid_shutdown_30s',
      timeLimitS,
      light: LIGHTS.find((l) => l === choice('light')) ?? 'bright',
      strings: [
        {
          name: 'A1',
          homeRunLeavesArray: true,
          beforeV: n('before'),
          readings: rated
            ? [
                {
                  afterS: n('seconds'),
                  positiveToNegativeV: volts,
                  positiveToEarthV: volts / 2,
                  negativeToEarthV: -volts / 2,
                  rated: true,
                  atInverterEnd: true,
                },
              ]
            : [],
          units: 14,
          followed: Array.from({ length: 14 }, () => [0, Math.max(1, n('seconds'))] as const).map(
            ([a, b]) => [a, b],
          ),
          notShuttingDown: 0,
          conductorsStayUp: false,
        },
      ],
      transmitters: [{ name: examplesCommissioning.transmitter1, takenOffAlone: true }],
    };
    const finding = judgeShutdownTest(input);
    return {
      finding: finding.strings[0]?.words ?? finding.headline,
      figures: [
        { label: examplesCommissioning.result, value: finding.result.replace('_', ' ') },
        {
          label: examplesCommissioning.limit,
          value: examplesCommissioning.voltageWithinAfterS(finding.limits.voltage, finding.limits.afterS),
        },
        { label: examplesCommissioning.itsSource, value: finding.limits.source },
        { label: examplesCommissioning.stillNeeded, value: finding.missing.join(' ') || '–' },
      ],
    };
  },
};

const QUARTERS = 96;
const DAYS = 5;
const UNITS = 14;
/** Six like strings under five clear days; of one, `share` of its output is missing on the last `lowDays`. */
function planeWith(share: number, lowDays: number, by: 'voltage' | 'current'): PlaneSeries {
  const steps = DAYS * QUARTERS;
  const light = Float64Array.from({ length: steps }, (_, q) => {
    const up = Math.sin((Math.PI * ((q % QUARTERS) / 4 - 5.5)) / 13);
    return up > 0.02 ? 950 * Math.pow(up, 1.2) : 0;
  });
  const rated = MODULE.vmpRef * MODULE.impRef * UNITS;
  const strings = Array.from({ length: 6 }, (_, k): StringSeries => {
    const own = 1 + (k - 2.5) * 0.004; // modules differ a little, as they do
    const missing = (q: number): number =>
      k === 2 && Math.floor(q / QUARTERS) >= DAYS - lowDays ? share : 0;
    const column = (of: (q: number) => number) =>
      Float64Array.from(light, (poa, q) => (poa > 0 ? of(q) : NaN));
    const voltage = column((q) => UNITS * MODULE.vmpRef * (by === 'voltage' ? 1 - missing(q) : 1));
    const current = column(
      (q) => ((MODULE.impRef * (light[q] ?? 0)) / 1000) * own * (by === 'current' ? 1 - missing(q) : 1),
    );
    return {
      id: `s${k}`,
      name: `A${k + 1}`,
      scope: 'string',
      units: UNITS,
      bypassGroups: MODULE.bypassGroups,
      powerRef: rated,
      voltage,
      current,
      power: Float64Array.from(voltage, (v, q) => v * (current[q] ?? NaN)),
      excluded: new Uint8Array(steps),
      ownBaseline: null,
    };
  });
  return {
    stepH: 0.25,
    dayOf: Int16Array.from(light, (poa, q) => (poa > 0 ? Math.floor(q / QUARTERS) : -1)),
    days: DAYS,
    poaGlobal: light,
    temperatureCell: new Float64Array(steps).fill(25),
    sunAzimuth: Float64Array.from(light, (_, q) => 180 + ((q % QUARTERS) / 4 - 12) * 15),
    gammaPmp: MODULE.gammaPmp,
    strings,
  };
}

export const lowOutputExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'missing',
      label: examplesCommissioning.missingInStringA3,
      unit: '%',
      min: 0,
      max: 90,
      start: 14.3,
    },
    {
      kind: 'number',
      key: 'days',
      label: examplesCommissioning.onHowManyOf,
      min: 0,
      max: DAYS,
      whole: true,
      start: 4,
    },
    {
      kind: 'choice',
      key: 'by',
      label: examplesCommissioning.whatIsMissing,
      options: [
        { value: 'voltage', label: examplesCommissioning.voltage },
        { value: 'current', label: examplesCommissioning.current },
      ],
      start: 'voltage',
    },
  ],
  answer: ({ number: n, choice }) => {
    const plane = planeWith(
      n('missing') / 100,
      n('days'),
      choice('by') === 'current' ? 'current' : 'voltage',
    );
    const finding = judgeOutput(plane, planeReference(plane), 2);
    const last = finding.days.at(-1);
    return {
      finding: finding.words,
      figures: [
        { label: examplesCommissioning.lastDayOverIts, value: percent(last?.ratio, 1) },
        { label: examplesCommissioning.modifiedZOfThat, value: number(last?.z, 1) },
        { label: examplesCommissioning.threshold, value: finding.threshold.source },
        {
          label: examplesCommissioning.lostOverTheDays,
          value: finding.lossKWh
            ? examplesCommissioning.kWhTo(finding.lossKWh.value, finding.lossKWh.low, finding.lossKWh.high)
            : '–',
        },
        { label: examplesCommissioning.itCouldAlsoBe, value: finding.signature?.couldBe.join('; ') || '–' },
      ],
    };
  },
};
