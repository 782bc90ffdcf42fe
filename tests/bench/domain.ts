import { UNIT_PRESETS } from '../../src/domain/equipment/unit-type';
import { judgeOutput } from '../../src/domain/output/low-output';
import { planeReference } from '../../src/domain/output/plane-reference';
import { generator, samplePlane } from '../../src/domain/output/sample-plane';
import { commandedSpans, judgementTimes, type StringContext } from '../../src/domain/verdicts/context';
import { judgeFrame } from '../../src/domain/verdicts/judge';
import { newMemory } from '../../src/domain/verdicts/memory';
import type { JudgedFrame } from '../../src/domain/verdicts/observe';

/**
 * What the judgements cost, as ratios to a bare loop over the same arrays in the same run: verdicts for 100,000 units
 * from one minute of frames, and the diagnosis of one string from 30 days of quarters. Quartiles of many rounds, for
 * the machine may be busy.
 */
const STRINGS = 5000;
const UNITS = 20;
const MINUTES = 40;
const NOON = 1_750_000_000;

const print = (name: string, value: number, unit: string): void =>
  void process.stdout.write(`${name} ${value.toPrecision(4)} ${unit}\n`);
/** Time of this process on the processor: what others do meanwhile doesn't count. */
const timed = (work: () => number): [ms: number, result: number] => {
  const from = process.cpuUsage();
  const result = work();
  const { user, system } = process.cpuUsage(from);
  return [(user + system) / 1000, result];
};
const lowQuartile = (values: number[]): number =>
  values.sort((a, b) => a - b)[Math.floor(values.length / 4)]!;

function verdicts(): void {
  const released = [{ sinceS: NOON - 86_400, inForce: 'released' as const }];
  const contexts = Array.from({ length: STRINGS }, (): StringContext => {
    const behaviour = UNIT_PRESETS.optimizing;
    return {
      behaviour,
      times: judgementTimes(60, 30),
      timeLimitSource: '',
      slots: new Array<boolean>(UNITS).fill(true),
      heardAtS: new Array<number>(UNITS).fill(0),
      commands: commandedSpans(behaviour, 'operating', released, []),
      light: [{ sinceS: NOON - 20_000, light: 'light' }],
      snowLikely: false,
    };
  });
  const memories = contexts.map(newMemory);
  // one unit in five hundred is in shutdown, and one string in a hundred changes something each minute
  const minute = (m: number): JudgedFrame[] =>
    contexts.map((_, s) => {
      const down = (u: number): boolean =>
        (s * 7 + u) % 500 === 0 || (s % 100 === m % 100 && u === m % UNITS && m % 2 === 0);
      return {
        atS: NOON + 60 * m,
        state: Array.from({ length: UNITS }, (_u, u) => (down(u) ? 2 : 1)),
        voltageOut: Array.from({ length: UNITS }, (_u, u) => (down(u) ? 60 : 3500 + u + (m % 7))),
        voltageIn: Array.from({ length: UNITS }, (_u, u) => 3600 + u),
      };
    });
  const bare: number[] = [];
  const judged: number[] = [];
  let changes = 0;
  for (let m = 0; m < MINUTES; m++) {
    const frames = minute(m);
    const [bareMs] = timed(() => {
      let sum = 0;
      for (const f of frames) {
        const { state, voltageOut, voltageIn } = f;
        for (let u = 0; u < UNITS; u++) sum += state[u]! + voltageOut![u]! + voltageIn![u]!;
      }
      return sum;
    });
    const [judgeMs, changed] = timed(() => {
      let n = 0;
      for (let s = 0; s < STRINGS; s++)
        n += judgeFrame(memories[s]!, contexts[s]!, frames[s]!).changes.length;
      return n;
    });
    if (m < 8) continue; // warm
    bare.push(bareMs);
    judged.push(judgeMs);
    changes += changed;
  }
  const b = lowQuartile(bare);
  const j = lowQuartile(judged);
  print('domain.verdicts.ratio_to_bare_loop', j / b, 'x');
  print('domain.verdicts.bare_ms', b, 'ms');
  print('domain.verdicts.ms_for_100000_units', j, 'ms');
  print('domain.verdicts.changes', changes, 'changes');
}

function diagnosis(): void {
  const strings = 20;
  const plane = samplePlane(generator(1), {
    strings,
    days: 30,
    faults: new Map([[3, { kind: 'units_missing', count: 2 }]]),
  });
  const pass: number[] = [];
  const whole: number[] = [];
  for (let k = 0; k < 40; k++) {
    const [passMs] = timed(() => {
      let sum = 0;
      // twenty times, so that both take about as long
      for (let again = 0; again < 20; again++)
        for (const s of plane.strings)
          for (let q = 0; q < s.power.length; q++)
            if (!Number.isNaN(s.power[q]!))
              sum += s.power[q]! + s.voltage[q]! + s.current[q]! + s.excluded[q]!;
      return sum;
    });
    const [wholeMs] = timed(() => {
      const reference = planeReference(plane);
      return plane.strings.reduce((n, _, i) => n + judgeOutput(plane, reference, i).days.length, 0);
    });
    if (k < 8) continue;
    pass.push(passMs / 20);
    whole.push(wholeMs);
  }
  const p = lowQuartile(pass);
  const w = lowQuartile(whole);
  print('domain.diagnosis.ratio_to_bare_pass', w / p, 'x');
  print('domain.diagnosis.ms_for_30_days_of_one_string', w / strings, 'ms');
}

verdicts();
diagnosis();
