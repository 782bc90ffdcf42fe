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
import { number, percent, quantity } from '../../drawings/numbers';
import type { Example } from './example';

/** Any instant does: only differences count. Epoch seconds. */
const START = 1_700_000_000;
const RULE_SETS = [
  { value: 'rapid_shutdown_30s', label: '30 s' },
  { value: 'rapid_shutdown_10s', label: '10 s' },
  { value: 'none', label: 'none' },
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
  unheard: 'not heard yet',
  passing: 'passing',
  shutdown: 'in shutdown',
  silent: 'silent',
  dark: 'dark',
} as const;
const VERDICT_WORDS = {
  ok: 'as it should be',
  stuck: 'stuck in shutdown',
  not_shutting_down: 'not shutting down',
  unconfirmed: 'unconfirmed',
  late: 'late',
  flapping: 'flapping',
} as const;

export const verdictExample: Example = {
  inputs: [
    {
      kind: 'choice',
      key: 'command',
      label: 'Command',
      options: [
        { value: 'initiator', label: 'shut down' },
        { value: 'released', label: 'release' },
      ],
      start: 'initiator',
    },
    {
      kind: 'choice',
      key: 'rules',
      label: 'Time limit of the rule set',
      options: RULE_SETS,
      start: 'rapid_shutdown_30s',
    },
    {
      kind: 'number',
      key: 'interval',
      label: 'Report interval',
      unit: 's',
      min: 5,
      max: 900,
      whole: true,
      start: 60,
    },
    {
      kind: 'choice',
      key: 'reports',
      label: 'The unit then reports',
      options: [
        { value: 'passing', label: 'passing' },
        { value: 'shutdown', label: 'shutdown' },
        { value: 'nothing', label: 'nothing' },
      ],
      start: 'passing',
    },
    {
      kind: 'number',
      key: 'after',
      label: 'Looked at after',
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
      finding: `${verdict === 'ok' ? 'As it should be, so far' : `Verdict: ${VERDICT_WORDS[verdict]}`}. State: ${state ? STATE_WORDS[state] : 'nothing is known'}.`,
      figures: [
        { label: 'Time limit', value: quantity(context.times.timeLimitS, 's') },
        { label: 'Where it comes from', value: context.timeLimitSource },
        { label: 'Grace before stuck', value: quantity(context.times.graceS, 's') },
      ],
    };
  },
};

export const conductorsExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'units',
      label: 'Units, all claim shutdown',
      min: 1,
      max: 63,
      whole: true,
      start: 14,
    },
    { kind: 'number', key: 'volts', label: 'Voltage at the input', unit: 'V', min: 0, max: 1500, start: 96 },
    { kind: 'number', key: 'strings', label: 'Strings on the input', min: 1, max: 6, whole: true, start: 1 },
    {
      kind: 'number',
      key: 'module',
      label: 'A passing module gives',
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
        finding: 'Nothing contradicts the claims. That is no proof: inverters read small voltages badly.',
        figures: [{ label: 'All units in shutdown', value: quantity(units * nominal, 'V', 1) }],
      };
    return {
      finding:
        evidence.scope === 'string'
          ? 'The conductors contradict the claims: the string is not shutting down, position unknown'
          : 'The conductors contradict the claims: a string on this input is not shutting down, which one can not be told',
      figures: [
        { label: 'Expected', value: quantity(evidence.expectedV, 'V', 1) },
        { label: 'Threshold', value: quantity(evidence.thresholdV, 'V', 1) },
        { label: 'Its source', value: evidence.thresholdSource },
        ...(evidence.unitsRange
          ? [
              {
                label: 'Units that would explain it',
                value: `${evidence.unitsRange[0]} to ${evidence.unitsRange[1]} of ${units}`,
              },
            ]
          : []),
        { label: 'It could also be', value: evidence.couldBe.join('; ') },
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
    zone: 'Zone 1',
    transmitters: [],
    logger: 'Logger 1',
    inverter: 'Inverter 1',
    input: name === 'A1' ? 1 : 2,
    slots: its,
    finding: null,
  });
  return {
    name: 'Example',
    atS: START,
    reportIntervalS: 60,
    strings: [
      string(
        'A1',
        slots('A1', silentOfFirst, () => 'Gateway 1'),
      ),
      string(
        'A2',
        slots('A2', silentOfSecond, (i) => (i < 6 ? 'Gateway 1' : 'Gateway 2')),
      ),
    ],
    zones: [{ name: 'Zone 1', inForce: 'released' }],
    transmitters: [],
    gateways: [
      { name: 'Gateway 1', lastHeardS: START - (silentOfFirst === 12 && silentOfSecond >= 6 ? 900 : 20) },
      { name: 'Gateway 2', lastHeardS: START - 20 },
    ],
    loggers: [{ name: 'Logger 1', connected: true }],
    inputs: [
      { inverter: 'Inverter 1', number: 1, currentA: 8 },
      { inverter: 'Inverter 1', number: 2, currentA: 8 },
    ],
  };
}

export const causesExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'first',
      label: 'Silent units of string A1, of 12',
      min: 0,
      max: 12,
      whole: true,
      start: 12,
    },
    {
      kind: 'number',
      key: 'second',
      label: 'Silent units of string A2, of 12',
      min: 0,
      max: 12,
      whole: true,
      start: 6,
    },
  ],
  answer: ({ number: n }) => {
    const causes = causesOf(siteWith(n('first'), n('second')));
    const [first] = causes;
    if (!first) return { finding: 'Nothing is silent, so there is no cause to look for', figures: [] };
    return {
      finding:
        causes.length === 1
          ? first.headline
          : `${number(causes.length)} causes; the largest: ${first.headline}`,
      figures: [
        { label: 'Confidence', value: percent(first.confidence) },
        { label: 'Evidence', value: first.evidence },
        { label: 'It could also be', value: first.alternatives.join('; ') || '–' },
      ],
    };
  },
};
