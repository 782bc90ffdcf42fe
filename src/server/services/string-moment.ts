import { conductThen, type UnitThen } from '../../domain/verdicts/conduct-then';
import { planeWords } from '../../domain/output/plane-words';
import { median } from '../../domain/output/robust';
import type { StringMoment } from '../../schemas/api/workbench';
import type { Tx } from '../db/transaction';
import { siblingsOf, stringFacts, type StringFacts } from '../queries/string-facts';
import { commandsOfZone, planeLight, siblingHistory, stringQuarters } from '../queries/string-history';
import { conductAt, frameAt, inputAt, staysOf, unitQuarters, type FrameThen } from '../queries/string-units';
import { noSuchString } from './string-axis';
import { voltageModel } from './string-history';
import { momentWords } from '../../words/refusals-history';

/** Reports so many intervals before a moment still tell of it. */
const INTERVALS = 3;
const SIBLING_STEP_S = 300;
/** A, above which a string is under load. */
const LOAD_FROM = 0.1;

const scaled = (value: number | null | undefined, by: number): number | null =>
  value === null || value === undefined ? null : value / by;
const middle = (values: readonly (number | null)[]): number | null => {
  const known = values.filter((v) => v !== null);
  return known.length > 0 ? median(known) : null;
};
const sum = (values: readonly (number | null)[]): number | null => {
  const known = values.filter((v) => v !== null);
  return known.length > 0 ? known.reduce((a, b) => a + b, 0) : null;
};

interface Typical {
  voltage: number | null;
  from: string;
}

/** V of a passing unit then: the other strings' around that minute, else the datasheet under a clear sky. */
async function typicalAt(tx: Tx, facts: StringFacts, at: Date, quarterly: boolean): Promise<Typical> {
  const siblings = await siblingsOf(tx, facts);
  const stepS = quarterly ? 900 : SIBLING_STEP_S;
  const start = Math.floor(at.getTime() / 1000 / stepS) * stepS;
  const steps = await siblingHistory(
    tx,
    siblings,
    { from: new Date(start * 1000), to: new Date((start + stepS) * 1000) },
    {
      resolution: quarterly ? 'quarter' : 'minute',
      stepS,
      timeZone: facts.timeZone,
      passingFrom: facts.module.vmpRef * 0.5,
      quantity: 'voltage',
    },
  );
  const step = steps[0];
  if (step) return { voltage: step.typical, from: momentWords.others(planeWords(facts.planeName)) };
  const modelled = voltageModel(facts)(at.getTime() / 1000);
  return {
    voltage: modelled,
    from: modelled === null ? '' : momentWords.clearSkyAndDatasheet,
  };
}

/** Units as their report shows them, or as the mean of the quarter does. */
function unitsOf(
  facts: StringFacts,
  frame: FrameThen | undefined,
  quarter: readonly (number | null)[] | null,
): UnitThen[] {
  const measuresOutput = facts.measures === 'output' || facts.measures === 'both';
  return Array.from({ length: facts.slots }, (_, i): UnitThen => {
    if (frame) {
      const output = measuresOutput ? scaled(frame.voltage[i], 100) : null;
      const input = scaled(
        frame.voltageIn?.[i] ?? (facts.measures === 'input' ? frame.voltage[i] : null),
        100,
      );
      return { voltage: output, voltageIn: input, claim: frame.claim[i] ?? null };
    }
    const mean = quarter?.[i] ?? null;
    return { voltage: measuresOutput ? mean : null, voltageIn: measuresOutput ? null : mean, claim: null };
  });
}

/**
 * The string as it stood at a minute: which unit sat where then, what each said, what was in force, what was expected.
 * @throws AppError not_found
 */
export async function readMoment(tx: Tx, ref: string, atS: number): Promise<StringMoment> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const at = new Date(atS * 1000);
  const withinS = Math.max(180, INTERVALS * facts.reportIntervalS);
  const told = facts.kind !== 'shutdown_only';
  const frame = told ? await frameAt(tx, facts.id, at, withinS) : undefined;
  const quarterAt = Math.floor(atS / 900) * 900;
  const quarterSpan = { from: new Date(quarterAt * 1000), to: new Date((quarterAt + 900) * 1000) };
  const quarter =
    told && !frame
      ? ((
          await unitQuarters(tx, facts.id, quarterSpan, facts.measures === 'input' ? 'voltageIn' : 'voltage')
        )[0] ?? null)
      : null;
  const input = await inputAt(tx, facts.inputId, at, withinS);
  const typical = await typicalAt(tx, facts, at, quarter !== null);
  const commands = await commandsOfZone(tx, facts.zoneId, { from: at, to: new Date(at.getTime() + 1) });
  const inForce = commands.at(-1)?.inForce ?? null;
  const stays = await staysOf(tx, facts.id, { from: at, to: new Date(at.getTime() + 1000) });
  const conduct = new Map((await conductAt(tx, facts.id, at)).map((c) => [c.position, c]));
  const units = unitsOf(facts, frame, quarter?.values ?? null);
  // of some quarters only the string's own mean is kept
  const unitsKnown = frame !== undefined || (quarter?.values ?? []).some((v) => v !== null);
  const mean =
    quarter && !unitsKnown ? (await stringQuarters(tx, facts.id, quarterSpan, 'voltage'))[0] : undefined;
  const source = frame ? 'report' : quarter ? 'quarter' : !told && input ? 'input' : 'nothing';
  const slots = units.map((unit, i): StringMoment['slots'][number] => {
    const position = i + 1;
    const serial = stays.find((s) => s.position === position)?.serial ?? null;
    const known = told && serial !== null && unitsKnown;
    const then = known
      ? conductThen(unit, conduct.get(position) ?? null, source === 'quarter', typical.voltage)
      : { state: null, verdict: null };
    return {
      position,
      serial,
      ...then,
      voltage: unit.voltage,
      voltageIn: unit.voltageIn,
      current: scaled(frame?.current[i], 1000),
      temperature: scaled(frame?.temperature[i], 10),
      power: scaled(frame?.power?.[i], 10),
      assumed: known && unit.voltage === null && (then.state === 'passing' || then.state === 'shutdown'),
      expected: serial === null ? null : typical.voltage,
    };
  });
  const placed = slots.filter((s) => s.serial !== null);
  const current = middle(slots.map((s) => s.current)) ?? input?.current ?? null;
  const held = (current ?? 0) > LOAD_FROM ? facts.bypassVoltage : facts.shutdownVoltage;
  const voltage = mean
    ? mean.value
    : told
      ? sum(
          placed.map((s) =>
            s.state !== 'passing' && s.state !== 'shutdown'
              ? null
              : (s.voltage ?? (s.state === 'passing' ? s.voltageIn : held)),
          ),
        )
      : (input?.voltage ?? null);
  const light = (
    await planeLight(
      tx,
      facts.planeId,
      { from: new Date(at.getTime() - withinS * 1000), to: new Date(at.getTime() + 1) },
      60,
    )
  ).at(-1);
  const commanded = inForce !== null && inForce !== 'released';
  return {
    at: atS,
    source,
    reportAt: frame?.at ?? (quarter ? quarterAt : source === 'input' ? (input?.at ?? null) : null),
    slots,
    voltage,
    current,
    power: voltage !== null && current !== null ? voltage * current : null,
    expectedVoltage: typical.voltage === null ? null : typical.voltage * placed.length,
    expectedInShutdown: commanded ? facts.shutdownVoltage * placed.length : null,
    expectedFrom: typical.from,
    inForce,
    light: { poaGlobal: light?.poaGlobal ?? null, temperatureModule: light?.temperatureModule ?? null },
    notes: [
      ...(source === 'quarter' ? [unitsKnown ? momentWords.meansOnly : momentWords.meanOnly] : []),
      ...(source === 'nothing' ? [momentWords.nothingReported] : []),
    ],
  };
}
