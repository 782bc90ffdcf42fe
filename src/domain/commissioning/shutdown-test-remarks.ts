import { shutdownTestSaid } from '../../words/domain-shutdown-test';
import { instrumentSaid, testLacks, testNotes } from '../../words/domain-shutdown-test-record';
import type { TestResult } from './test-results';
import type { Instrument, RoundEvidence, TestedPart, TestReading, TestRecord } from './shutdown-test-record';

/** What a test still lacks, and what else is to be said of it. */

/** Older than this, days, a calibration is worth a look at the certificate; common practice. */
const CALIBRATION_DAYS = 366;
/** Reported and tapped times that differ by more, seconds, are told. */
const CLOCKS_APART_S = 10;

/**
 * Why an instrument can't decide a test; empty: it can. The rating must reach the highest voltage read; category III
 * or higher is common practice for the inverter's end of a home run.
 */
export function instrumentFaults(
  instrument: Instrument | null,
  provedAfter: boolean | null,
  highestV: number,
): string[] {
  if (instrument === null) return [instrumentSaid.none];
  const faults: string[] = [];
  if (instrument.category !== 'CAT III' && instrument.category !== 'CAT IV')
    faults.push(
      instrument.category === 'none'
        ? instrumentSaid.noCategory
        : instrumentSaid.category(instrument.category),
    );
  if (instrument.ratedV < highestV)
    faults.push(instrumentSaid.rating(instrument.ratedV, highestV.toFixed(0)));
  if (!instrument.provedBefore) faults.push(instrumentSaid.notProvedBefore);
  if (provedAfter !== true)
    faults.push(provedAfter === null ? instrumentSaid.notProvedYet : instrumentSaid.provedFalse);
  return faults;
}

/** What a fuller test would still need. */
export function missing(
  strings: readonly { name: string; result: TestResult }[],
  notAlone: readonly { name: string }[],
  faults: readonly string[],
  readings: readonly TestReading[],
  light: string,
  timeLimitS: number,
): string[] {
  const list: string[] = [];
  if (notAlone.length > 0) list.push(testLacks.takeOffAlone(notAlone.map((t) => t.name)));
  if (readings.length > 0 || faults.length > 1) list.push(...faults);
  const open = strings
    .filter((s) => s.result === 'consistent' || s.result === 'not_witnessed')
    .map((s) => s.name);
  if (open.length > 0) list.push(testLacks.readAtInverterEnd(open, timeLimitS));
  if (light === 'night' || light === 'snow') list.push(shutdownTestSaid.testInLight);
  return list;
}

/** What a reader should know beside the results. */
export function notesOf(
  tested: readonly TestedPart[],
  record: TestRecord,
  evidence: readonly RoundEvidence[],
): string[] {
  const notes: string[] = [];
  record.rounds.forEach((round, i) => {
    const seen = evidence[i];
    if (!seen || round.watchStarted === null) return;
    if (round.operated && seen.command) {
      const apart = (Date.parse(round.operated.at) - Date.parse(seen.command.since)) / 1000;
      if (Math.abs(apart) > CLOCKS_APART_S)
        notes.push(
          (apart > 0 ? testNotes.reportedBeforeTap : testNotes.reportedAfterTap)(
            i + 1,
            Math.abs(apart).toFixed(0),
          ),
        );
    } else if (round.operated) notes.push(testNotes.noCommandReported(i + 1));
    if (round.transmitter === null) return;
    const others = tested.filter(
      (s) =>
        !s.transmitters.includes(round.transmitter ?? '') &&
        seen.strings.some((c) => c.string === s.id && c.units.some((u) => u.followed !== null)),
    );
    if (others.length > 0)
      notes.push(
        testNotes.othersShutDown(
          i + 1,
          others.map((s) => s.name),
        ),
      );
  });
  const day = record.rounds.find((r) => r.watchStarted)?.watchStarted?.at;
  const calibrated = record.plan?.instrument?.calibratedOn;
  if (day && calibrated && Date.parse(day) - Date.parse(calibrated) > CALIBRATION_DAYS * 86_400_000)
    notes.push(testNotes.calibrationOld(calibrated));
  for (const s of tested) {
    const last = evidence.findLast((e) => e.strings.some((c) => c.string === s.id && c.inputAgain !== null));
    const again = last?.strings.find((c) => c.string === s.id);
    if (s.kind !== 'shutdown_only' || !again?.inputAgain || again.inputBeforeV === null) continue;
    if (again.inputAgain.afterS >= 60 && again.inputAgain.voltageV < again.inputBeforeV / 2)
      notes.push(
        testNotes.notBack(s.name, again.inputAgain.voltageV.toFixed(0), again.inputAgain.afterS.toFixed(0)),
      );
  }
  return notes;
}
