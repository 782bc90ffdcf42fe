import type { TestResult } from './shutdown-test';
import type { Instrument, RoundEvidence, TestedPart, TestReading, TestRecord } from './shutdown-test-record';
import { counted, listed } from './shutdown-test-words';

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
  if (instrument === null) return ['No instrument is named: readings do not decide without one.'];
  const faults: string[] = [];
  if (instrument.category !== 'CAT III' && instrument.category !== 'CAT IV')
    faults.push(
      `The instrument is marked ${instrument.category === 'none' ? 'without a category' : instrument.category}: category III or IV is needed at the inverter's end.`,
    );
  if (instrument.ratedV < highestV)
    faults.push(`The instrument is rated for ${instrument.ratedV} V; ${highestV.toFixed(0)} V were read.`);
  if (!instrument.provedBefore)
    faults.push('The instrument was not proved on a known source before the test.');
  if (provedAfter !== true)
    faults.push(
      provedAfter === null
        ? 'The instrument has not been proved on a known source after the test yet.'
        : 'The instrument failed when it was proved after the test: its readings decide nothing.',
    );
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
  if (notAlone.length > 0)
    list.push(
      `Take each transmitter off alone once: ${listed(notAlone.map((t) => t.name))} ${notAlone.length === 1 ? 'was' : 'were'} not shown so. A string that hears a neighbour's transmitter shows itself only then.`,
    );
  if (readings.length > 0 || faults.length > 1) list.push(...faults);
  const open = strings
    .filter((s) => s.result === 'consistent' || s.result === 'not_witnessed')
    .map((s) => s.name);
  if (open.length > 0)
    list.push(
      `Read + to −, + to earth and − to earth with a rated instrument at the inverter end of ${open.length > 6 ? counted(open.length, 'home run') : listed(open)}: + to − before the command, all three within ${timeLimitS} s after it.`,
    );
  if (light === 'night' || light === 'snow')
    list.push('Test again in light that powers the units: without it a dead string proves nothing.');
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
    const name = `Round ${i + 1}`;
    if (round.operated && seen.command) {
      const apart = (Date.parse(round.operated.at) - Date.parse(seen.command.since)) / 1000;
      if (Math.abs(apart) > CLOCKS_APART_S)
        notes.push(
          `${name}: the logger reported the command ${Math.abs(apart).toFixed(0)} s ${apart > 0 ? 'before' : 'after'} the tap; their clocks or the tap are off.`,
        );
    } else if (round.operated)
      notes.push(`${name}: the logger reported no command; seconds count from the tap.`);
    if (round.transmitter === null) return;
    const others = tested.filter(
      (s) =>
        !s.transmitters.includes(round.transmitter ?? '') &&
        seen.strings.some((c) => c.string === s.id && c.units.some((u) => u.followed !== null)),
    );
    if (others.length > 0)
      notes.push(
        `${name}: ${listed(others.map((s) => s.name))} shut down too, though not drawn as hearing this transmitter.`,
      );
  });
  const day = record.rounds.find((r) => r.watchStarted)?.watchStarted?.at;
  const calibrated = record.plan?.instrument?.calibratedOn;
  if (day && calibrated && Date.parse(day) - Date.parse(calibrated) > CALIBRATION_DAYS * 86_400_000)
    notes.push(
      `The instrument was calibrated on ${calibrated}, more than a year before: see whether its certificate still holds.`,
    );
  for (const s of tested) {
    const last = evidence.findLast((e) => e.strings.some((c) => c.string === s.id && c.inputAgain !== null));
    const again = last?.strings.find((c) => c.string === s.id);
    if (s.kind !== 'shutdown_only' || !again?.inputAgain || again.inputBeforeV === null) continue;
    if (again.inputAgain.afterS >= 60 && again.inputAgain.voltageV < again.inputBeforeV / 2)
      notes.push(
        `${s.name} has not come back: its input stood at ${again.inputAgain.voltageV.toFixed(0)} V ${again.inputAgain.afterS.toFixed(0)} s after the release.`,
      );
  }
  return notes;
}
