import type { Knex } from 'knex';
import { keyOf, uniform } from '../../simulator/chance';
import type {
  Act,
  RoundEvidence,
  StringConduct,
  TestedPart,
  TestFacts,
} from '../../src/domain/commissioning/shutdown-test-record';

/** What was read and reported in the rounds of the demo's shutdown tests. */

/** The initiator, then each transmitter alone where the strings hear several. */
export function roundsOf(facts: TestFacts, tested: readonly TestedPart[]): (string | null)[] {
  const heard = facts.transmitters.filter((t) => tested.some((s) => s.transmitters.includes(t.id)));
  return facts.transmitters.length > 1 ? [null, ...heard.map((t) => t.id)] : [null];
}

/** Open-circuit voltage of each string at work's temperature, V. */
export async function vocOf(db: Knex.Transaction, zoneId: number): Promise<Map<string, number>> {
  const { rows } = await db.raw<{ rows: { ref: string; voc: number }[] }>(
    `select s.ref, sum(m.voc_ref)::float8 as voc from string s join slot on slot.string_id = s.id
     join module_type m on m.id = slot.module_type_id where s.zone_id = ? group by s.ref`,
    [zoneId],
  );
  return new Map(rows.map((r) => [r.ref, r.voc * 0.93]));
}

const spread = (s: TestedPart, of: number): number => uniform(keyOf(s.name), of);
const tenth = (v: number): number => Math.round(v * 10) / 10;

/** Volts left over a string of which these positions keep passing. */
const leftOf = (s: TestedPart, voc: number, live: readonly number[]): number =>
  s.shutdownV.nominal * (0.98 + 0.04 * spread(s, 1)) + live.length * (voc / s.serials.length);

export function reading(
  round: number,
  s: TestedPart,
  voc: number,
  afterS: number | null,
  live: readonly number[],
): Act {
  const v = tenth(afterS === null ? voc : leftOf(s, voc, live));
  return {
    kind: 'reading',
    round,
    string: s.id,
    moment: afterS === null ? 'before' : 'after',
    afterS,
    secondsFrom: 'clock',
    atInverterEnd: true,
    voltages: {
      positiveToNegativeV: v,
      positiveToEarthV: tenth(v * 0.51),
      negativeToEarthV: -tenth(v * 0.49),
    },
    note: '',
  };
}

export function roundSeen(
  facts: TestFacts,
  own: readonly TestedPart[],
  volts: ReadonlyMap<string, number>,
  commandS: number,
  transmitter: string | null,
  live: (s: TestedPart) => number[],
): RoundEvidence {
  const iso = (s: number) => new Date(s * 1000).toISOString();
  const where = facts.transmitters.find((t) => t.id === transmitter)?.name ?? facts.zone.name;
  return {
    command: {
      inForce: transmitter === null ? 'initiator' : 'keep_alive_lost',
      where,
      since: iso(commandS),
      by: transmitter === null ? facts.initiator.name : where,
    },
    release: { since: iso(commandS + 100) },
    origin: 'reported',
    from: iso(commandS - 210),
    to: iso(commandS + 280),
    strings: own.map((s) => conductSeen(s, volts.get(s.id) ?? 0, commandS, transmitter !== null, live(s))),
  };
}

function conductSeen(
  s: TestedPart,
  voc: number,
  commandS: number,
  slow: boolean,
  live: readonly number[],
): StringConduct {
  const tells = s.kind !== 'shutdown_only';
  const gone = s.serials.map((_, i) =>
    Math.round((slow || s.transmitters.length > 0 ? 13 : 3) + 6 * spread(s, 10 + i)),
  );
  const unit = voc / s.serials.length;
  const voltage = Array.from({ length: 120 }, (_, t) =>
    tenth(
      s.serials.reduce<number>((sum, _serial, i) => {
        const down = t >= gone[i]! && t < 103 + (i % 5) && !live.includes(i + 1);
        return sum + (down ? s.shutdownV.nominal / s.serials.length : unit);
      }, 0),
    ),
  );
  return {
    string: s.id,
    traces: tells
      ? [
          {
            measuringPoint: 'unit_sum',
            accuracyV: tenth(voc * 0.01),
            startedAt: new Date(commandS * 1000).toISOString(),
            voltage,
          },
        ]
      : [],
    units: s.serials.map((serial, i) => {
      const passing = live.includes(i + 1);
      const told = tells && serial !== null;
      return {
        position: i + 1,
        serial,
        followed: told && !passing ? [gone[i]! - 1, gone[i]!] : null,
        passedAtS: told && passing ? 99 : null,
        downBefore: false,
        basis: told ? 'measured' : 'nothing',
        returned: told && !passing ? [2 + (i % 5), 3 + (i % 5)] : null,
        heldAtS: null,
      };
    }),
    reports: tells ? 120 : 0,
    input: null,
    inputBeforeV: null,
    sums: [],
    inputs: [],
    inputAgain: null,
  };
}
