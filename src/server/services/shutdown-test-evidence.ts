import { conductOf, type ReportedTrace } from '../../domain/commissioning/shutdown-test-evidence';
import type { RoundEvidence, TestRecord, TestRound } from '../../domain/commissioning/shutdown-test-record';
import { timeLimitOf } from '../../domain/verdicts/context';
import type { Watch } from '../../schemas/api/shutdown-test';
import type { Tx } from '../db/transaction';
import {
  commandsSaid,
  framesIn,
  inputsIn,
  newestReports,
  tracesIn,
  type Span,
  type WatchedZone,
} from '../queries/shutdown-test-evidence';
import { testEvidenceWords } from '../../words/refusals-cases';

/** A round that nobody ends is watched no longer, seconds. */
const LONGEST_ROUND_S = 2 * 3600;
/** A reported command may lie so much before "start watching", seconds: clocks differ. */
const CLOCK_SLACK_S = 15;
/** Reports so old still say what a unit did when the command came, seconds, or three report intervals. */
const LOOK_BACK_S = 120;

const seconds = (iso: string): number => Date.parse(iso) / 1000;

/** What was reported in each round; rounds that nobody watched have none. */
export async function readEvidence(
  tx: Tx,
  zone: WatchedZone,
  record: TestRecord,
  now: Date,
): Promise<RoundEvidence[]> {
  const evidence: RoundEvidence[] = [];
  for (const round of record.rounds) evidence.push(await roundEvidence(tx, zone, record, round, now));
  return evidence;
}

async function roundEvidence(
  tx: Tx,
  zone: WatchedZone,
  record: TestRecord,
  round: TestRound,
  now: Date,
): Promise<RoundEvidence> {
  if (round.watchStarted === null)
    return { command: null, release: null, origin: null, from: '', to: '', strings: [] };
  const watchS = seconds(round.watchStarted.at);
  const lookBackS = Math.max(LOOK_BACK_S, 3 * zone.facts.reportIntervalS);
  const untilS = round.ended
    ? seconds(round.ended.at)
    : Math.min(now.getTime() / 1000, watchS + LONGEST_ROUND_S);
  const span: Span = { from: new Date((watchS - lookBackS) * 1000), to: new Date(untilS * 1000) };
  const tested = zone.strings.filter((s) => record.plan?.strings.includes(s.part.id));
  const stringIds = tested.map((s) => s.dbId);
  const transmitterId =
    round.transmitter === null ? null : (zone.transmitterIds.get(round.transmitter) ?? null);
  const { during } = await commandsSaid(tx, zone.zoneId, transmitterId === null ? [] : [transmitterId], span);
  const here = during.filter((c) =>
    transmitterId === null ? c.zoneId === zone.zoneId : c.transmitterId === transmitterId,
  );
  const command = here.find(
    (c) => c.inForce !== 'released' && c.since.getTime() / 1000 >= watchS - CLOCK_SLACK_S,
  );
  const release = command && here.find((c) => c.inForce === 'released' && c.since > command.since);
  const reportedS = command ? command.since.getTime() / 1000 : null;
  const tappedS = round.operated ? seconds(round.operated.at) : null;
  const commandS = reportedS ?? tappedS;
  // the earlier of the two: what came after somebody released proves nothing of the shutdown
  const releases = [
    ...(release ? [release.since.getTime() / 1000] : []),
    ...(round.released ? [seconds(round.released.at)] : []),
  ];
  const frames = await framesIn(tx, stringIds, span);
  const traces = await tracesIn(tx, stringIds, span);
  const inputs = await inputsIn(
    tx,
    tested.map((s) => s.inputId),
    span,
  );
  const times = {
    commandS,
    releaseS: releases.length === 0 ? null : Math.min(...releases),
    untilS,
    timeLimitS: timeLimitOf(zone.facts.ruleSet).timeLimitS,
    lookBackS,
  };
  return {
    command: command
      ? { inForce: command.inForce, where: command.where, since: command.since.toISOString(), by: command.by }
      : null,
    release: release ? { since: release.since.toISOString() } : null,
    origin: reportedS !== null ? 'reported' : tappedS !== null ? 'tapped' : null,
    from: span.from.toISOString(),
    to: span.to.toISOString(),
    strings: tested.map((s) =>
      conductOf(
        {
          part: s.part,
          limits: s.limits,
          frames: frames
            .filter((f) => f.stringId === s.dbId)
            .map((f) => ({
              atS: f.atS,
              state: f.state,
              voltageOut: f.voltageOut,
              voltageIn: f.voltageIn ?? undefined,
            })),
          traces: traces
            .filter((t) => t.stringId === s.dbId && t.startedS >= watchS - CLOCK_SLACK_S)
            .map((t): ReportedTrace => ({
              measuringPoint: t.measuringPoint,
              accuracyV: t.accuracyV,
              startedS: t.startedS,
              voltage: t.voltage.map((v) => (v === null ? null : v / 10)),
              unitV: t.unitVoltage?.map((row) => row.map((v) => (v === null ? null : v / 100))) ?? null,
            })),
          inputs: inputs.filter((i) => i.inputId === s.inputId),
        },
        times,
      ),
    ),
  };
}

/** Whether reports of the strings arrive now, and why not. */
export async function readWatch(tx: Tx, zone: WatchedZone, now: Date): Promise<Watch> {
  const { facts } = zone;
  const telling = zone.strings.filter((s) => s.part.kind !== 'shutdown_only');
  const newest = await newestReports(
    tx,
    zone.strings.map((s) => s.dbId),
    zone.strings.map((s) => s.inputId),
  );
  const { before, during } = await commandsSaid(tx, zone.zoneId, [...zone.transmitterIds.values()], {
    from: now,
    to: now,
  });
  const newestAt = telling.length > 0 ? newest.frames : newest.inputs;
  const staleS = newestAt === null ? Infinity : (now.getTime() - newestAt.getTime()) / 1000;
  const canWatch = staleS <= 3 * facts.reportIntervalS;
  const quiet = newest.loggers.filter(
    (l) => l.spokeAt === null || now.getTime() - l.spokeAt.getTime() > 5000 * facts.reportIntervalS,
  );
  return {
    canWatch,
    newestAt: newestAt?.toISOString() ?? null,
    words: watchWords(
      canWatch,
      telling.length,
      zone,
      newest.loggers.length,
      quiet.map((l) => l.serial),
      newestAt,
    ),
    inForce: [...before, ...during]
      .filter((c) => c.inForce !== 'released')
      .map((c) => ({ where: c.where, since: c.since.toISOString() })),
  };
}

function watchWords(
  canWatch: boolean,
  telling: number,
  zone: WatchedZone,
  loggers: number,
  quiet: readonly string[],
  newestAt: Date | null,
): string {
  const only = testEvidenceWords.onlyInstrument;
  if (canWatch && telling === 0) return testEvidenceWords.tellNothing;
  if (canWatch && telling < zone.strings.length)
    return testEvidenceWords.someTellNothing(zone.strings.length - telling);
  if (canWatch) return testEvidenceWords.reportsArrive;
  if (loggers === 0 && newestAt === null) return testEvidenceWords.noLogger(only);
  if (quiet.length > 0) return testEvidenceWords.loggersQuiet(quiet.join(' and '), only);
  if (newestAt === null) return testEvidenceWords.noneReportedYet(only);
  return testEvidenceWords.unitsSilent(only);
}
