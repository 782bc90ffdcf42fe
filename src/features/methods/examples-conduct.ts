import { causesOf } from '../../domain/causes/causes';
import type { SiteCondition, SlotCondition } from '../../domain/causes/site';
import { UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { CLAIMS, UNIT_STATES, VERDICTS, type InForce } from '../../domain/verdicts/codes';
import { judgeInput } from '../../domain/verdicts/conductors';
import {
  commandedSpans,
  judgementTimes,
  timeLimitOf,
  type RuleSet,
  type StringContext,
} from '../../domain/verdicts/context';
import { judgeFrame, sweepString } from '../../domain/verdicts/judge';
import { newMemory } from '../../domain/verdicts/memory';
import { percent, quantity } from '../../drawings/numbers';
import type { Example } from './example';
import { examplesConduct } from '../../words/method-examples';

/** Any instant does: only differences count. Epoch seconds. */
const START = 1_700_000_000;
const RULE_SETS = [
  { value: 'rapid_shutdown_30s', label: '30 s' },
  { value: 'rapid_shutdown_10s', label: '10 s' },
  { value: 'none', label: examplesConduct.none },
] as const;

function contextFor(
  ruleSet: RuleSet,
  reportIntervalS: number,
  units: number,
  command: InForce,
): StringContext {
  const behaviour = UNIT_PRESETS.monitored;
  const { timeLimitS, source } = timeLimitOf(ruleSet);
  return {
    behaviour,
    times: judgementTimes(reportIntervalS, timeLimitS),
    timeLimitSource: source,
    slots: new Array<boolean>(units).fill(true),
    heardAtS: new Array<number>(units).fill(START - 86_400),
    commands: commandedSpans(
      behaviour,
      'operating',
      [
        { sinceS: START - 86_400, inForce: command === 'released' ? 'initiator' : 'released' },
        { sinceS: START, inForce: command },
      ],
      [],
    ),
    light: [],
    snowLikely: false,
  };
}

const STATE_WORDS = {
  unheard: examplesConduct.notHeardYet,
  passing: examplesConduct.passing,
  shutdown: examplesConduct.inShutdown,
  silent: examplesConduct.silent,
  dark: examplesConduct.dark,
} as const;
const VERDICT_WORDS = {
  ok: examplesConduct.asItShouldBe,
  stuck: examplesConduct.stuckInShutdown,
  not_shutting_down: examplesConduct.notShuttingDown,
  unconfirmed: examplesConduct.unconfirmed,
  late: examplesConduct.late,
  flapping: examplesConduct.flapping,
} as const;

export const verdictExample: Example = {
  inputs: [
    {
      kind: 'choice',
      key: 'command',
      label: examplesConduct.command,
      options: [
        { value: 'initiator', label: examplesConduct.shutDown },
        { value: 'released', label: examplesConduct.release },
      ],
      start: 'initiator',
    },
    {
      kind: 'choice',
      key: 'rules',
      label: examplesConduct.timeLimitOfThe,
      options: RULE_SETS,
      start: 'rapid_shutdown_30s',
    },
    {
      kind: 'number',
      key: 'interval',
      label: examplesConduct.reportInterval,
      unit: 's',
      min: 5,
      max: 900,
      whole: true,
      start: 60,
    },
    {
      kind: 'choice',
      key: 'reports',
      label: examplesConduct.theUnitThenReports,
      options: [
        { value: 'passing', label: examplesConduct.passing },
        { value: 'shutdown', label: examplesConduct.shutdown },
        { value: 'nothing', label: examplesConduct.nothing },
      ],
      start: 'passing',
    },
    {
      kind: 'number',
      key: 'after',
      label: examplesConduct.lookedAtAfter,
      unit: 's',
      min: 0,
      max: 7200,
      whole: true,
      start: 130,
    },
  ],
  answer: ({ number: n, choice }) => {
    const released = choice('command') === 'released';
    const ruleSet = RULE_SETS.find((r) => r.value === choice('rules'))?.value ?? 'none';
    const interval = n('interval');
    const context = contextFor(ruleSet, interval, 1, released ? 'released' : 'initiator');
    const memory = newMemory(context);
    const claim = (word: (typeof CLAIMS)[number]): number => CLAIMS.indexOf(word);
    for (let atS = START - 10 * interval; atS < START; atS += interval)
      judgeFrame(memory, context, { atS, state: [claim(released ? 'shutdown' : 'passing')] });
    const last = START + n('after');
    const reports = choice('reports');
    if (reports !== 'nothing')
      for (let atS = START + Math.min(interval, 10); atS <= last; atS += interval)
        judgeFrame(memory, context, { atS, state: [claim(reports === 'passing' ? 'passing' : 'shutdown')] });
    sweepString(memory, context, last);
    const state = UNIT_STATES[memory.state[0] ?? -1];
    const verdict = VERDICTS[memory.verdict[0] ?? 0] ?? 'ok';
    return {
      finding: examplesConduct.verdictAndState(verdict, VERDICT_WORDS[verdict], state && STATE_WORDS[state]),
      figures: [
        { label: examplesConduct.timeLimit, value: quantity(context.times.timeLimitS, 's') },
        { label: examplesConduct.whereItComesFrom, value: context.timeLimitSource },
        { label: examplesConduct.graceBeforeStuck, value: quantity(context.times.graceS, 's') },
      ],
    };
  },
};

export const conductorsExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'units',
      label: examplesConduct.unitsAllClaimShutdown,
      min: 1,
      max: 63,
      whole: true,
      start: 14,
    },
    {
      kind: 'number',
      key: 'volts',
      label: examplesConduct.voltageAtTheInput,
      unit: 'V',
      min: 0,
      max: 1500,
      start: 96,
    },
    {
      kind: 'number',
      key: 'strings',
      label: examplesConduct.stringsOnTheInput,
      min: 1,
      max: 6,
      whole: true,
      start: 1,
    },
    {
      kind: 'number',
      key: 'module',
      label: examplesConduct.aPassingModuleGives,
      unit: 'V',
      min: 5,
      max: 150,
      start: 36,
    },
  ],
  answer: ({ number: n }) => {
    const units = n('units');
    const context = contextFor('rapid_shutdown_30s', 60, units, 'initiator');
    const memory = newMemory(context);
    const { timeLimitS, capacitorHoldS } = context.times;
    const from = START + timeLimitS + capacitorHoldS;
    for (let k = 1; k <= 5; k++) {
      const atS = from + 60 * k;
      judgeFrame(memory, context, { atS, state: new Array<number>(units).fill(CLAIMS.indexOf('shutdown')) });
      judgeInput(memory, context, {
        atS,
        voltageV: n('volts'),
        currentA: 0,
        strings: n('strings'),
        module: { expectedV: n('module'), relativeSd: 0.03 },
      });
    }
    const evidence = memory.finding?.evidence;
    const nominal = context.behaviour.shutdownVoltage.nominal;
    if (!evidence)
      return {
        finding: examplesConduct.nothingContradictsTheClaims,
        figures: [{ label: examplesConduct.allUnitsInShutdown, value: quantity(units * nominal, 'V', 1) }],
      };
    return {
      finding:
        evidence.scope === 'string'
          ? examplesConduct.theConductorsContradictThe
          : examplesConduct.theConductorsContradictTheClaims,
      figures: [
        { label: examplesConduct.expected, value: quantity(evidence.expectedV, 'V', 1) },
        { label: examplesConduct.threshold, value: quantity(evidence.thresholdV, 'V', 1) },
        { label: examplesConduct.itsSource, value: evidence.thresholdSource },
        ...(evidence.unitsRange
          ? [
              {
                label: examplesConduct.unitsThatWouldExplain,
                value: examplesConduct.toOf(evidence.unitsRange[0], evidence.unitsRange[1], units),
              },
            ]
          : []),
        { label: examplesConduct.itCouldAlsoBe, value: evidence.couldBe.join('; ') },
      ],
    };
  },
};

/** Two strings by two gateways: gateway 1 hears the whole first string and the first half of the second. */
function siteWith(silentOfFirst: number, silentOfSecond: number): SiteCondition {
  const slots = (name: string, silent: number, gatewayOf: (i: number) => string): SlotCondition[] =>
    Array.from({ length: 12 }, (_, i) => ({
      position: i + 1,
      serial: `${name}-${i + 1}`,
      state: i < silent ? 'silent' : 'passing',
      verdict: 'ok',
      sinceS: START - (i < silent ? 900 : 30_000),
      seenS: START - (i < silent ? 900 : 20),
      gateway: gatewayOf(i),
    }));
  const string = (name: string, its: SlotCondition[]): SiteCondition['strings'][number] => ({
    id: name,
    name,
    kind: 'monitored',
    releasedBy: 'logger',
    zone: examplesConduct.zone1,
    transmitters: [],
    logger: examplesConduct.logger1,
    inverter: examplesConduct.inverter1,
    input: name === 'A1' ? 1 : 2,
    slots: its,
    finding: null,
  });
  return {
    name: examplesConduct.example,
    atS: START,
    reportIntervalS: 60,
    strings: [
      string(
        'A1',
        slots('A1', silentOfFirst, () => examplesConduct.gateway1),
      ),
      string(
        'A2',
        slots('A2', silentOfSecond, (i) => (i < 6 ? examplesConduct.gateway1 : examplesConduct.gateway2)),
      ),
    ],
    zones: [{ name: examplesConduct.zone1, inForce: 'released' }],
    transmitters: [],
    gateways: [
      {
        name: examplesConduct.gateway1,
        lastHeardS: START - (silentOfFirst === 12 && silentOfSecond >= 6 ? 900 : 20),
      },
      { name: examplesConduct.gateway2, lastHeardS: START - 20 },
    ],
    loggers: [{ name: examplesConduct.logger1, connected: true }],
    inputs: [
      { inverter: examplesConduct.inverter1, number: 1, currentA: 8 },
      { inverter: examplesConduct.inverter1, number: 2, currentA: 8 },
    ],
  };
}

export const causesExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'first',
      label: examplesConduct.silentUnitsOfString,
      min: 0,
      max: 12,
      whole: true,
      start: 12,
    },
    {
      kind: 'number',
      key: 'second',
      label: examplesConduct.silentUnitsOfStringA2,
      min: 0,
      max: 12,
      whole: true,
      start: 6,
    },
  ],
  answer: ({ number: n }) => {
    const causes = causesOf(siteWith(n('first'), n('second')));
    const [first] = causes;
    if (!first) return { finding: examplesConduct.nothingIsSilentSo, figures: [] };
    return {
      finding:
        causes.length === 1
          ? first.headline
          : examplesConduct.causesTheLargest(causes.length, first.headline),
      figures: [
        { label: examplesConduct.confidence, value: percent(first.confidence) },
        { label: examplesConduct.evidence, value: first.evidence },
        { label: examplesConduct.itCouldAlsoBe, value: first.alternatives.join('; ') || '–' },
      ],
    };
  },
};
