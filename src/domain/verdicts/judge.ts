import {
  commandedAt,
  lightAt,
  type Commanded,
  type LightSpan,
  type Prepared,
  type StringContext,
} from './context';
import {
  evidenceFor,
  stateOf,
  UNCHANGED,
  verdictOf,
  type FindingChange,
  type JudgeOutcome,
  type UnitChange,
} from './evidence';
import { NO_STATE, SEEN_PASSING, SEEN_SHUTDOWN, type StringMemory } from './memory';
import {
  claimedSum,
  MEASURED,
  outputFollowsClaim,
  outputLimits,
  scanFrame,
  type JudgedFrame,
} from './observe';
import { UNIT_STATES, VERDICTS } from './codes';

/**
 * State and verdict of the units of one string, on event time. A state is the unit's own claim unless a voltage
 * measured on its conductors contradicts it. Silence, night and time limits are for `sweepString`; voltages of the
 * string as a whole for `judgeInput`.
 */

const UNHEARD = UNIT_STATES.indexOf('unheard');
const PASSING = UNIT_STATES.indexOf('passing');
const SHUTDOWN = UNIT_STATES.indexOf('shutdown');
const SILENT = UNIT_STATES.indexOf('silent');
const DARK = UNIT_STATES.indexOf('dark');
const OK = VERDICTS.indexOf('ok');
const STUCK = VERDICTS.indexOf('stuck');
const NOT_SHUTTING_DOWN = VERDICTS.indexOf('not_shutting_down');
const UNCONFIRMED = VERDICTS.indexOf('unconfirmed');
const LATE = VERDICTS.indexOf('late');
const FLAPPING = VERDICTS.indexOf('flapping');

/** A unit is silent after so many report intervals. */
export const SILENT_AFTER_INTERVALS = 3;
/** A gap in a unit's reports that counts as a night when nobody swept in between, seconds. */
const NIGHT_GAP_S = 4 * 3600;

/** The context's own figures for `atS`, made once and again only when a command or the light changes. */
function preparedFor(context: StringContext, atS: number): Prepared {
  const known = context.prepared;
  if (known !== undefined && atS >= known.fromS && atS < known.untilS) return known;
  const command = commandedAt(context.commands, atS);
  const light = lightAt(context.light, atS);
  let untilS = Infinity;
  for (const c of context.commands) if (c.sinceS > atS) untilS = Math.min(untilS, c.sinceS);
  for (const l of context.light) if (l.sinceS > atS) untilS = Math.min(untilS, l.sinceS);
  context.prepared = {
    limits: known?.limits ?? outputLimits(context.behaviour),
    units: known?.units ?? context.slots.filter(Boolean).length,
    command,
    light,
    fromS: Math.max(command.sinceS, light.sinceS),
    untilS,
  };
  return context.prepared;
}

/**
 * Judges one frame and updates `memory` in place. A frame older than the newest one judged changes nothing, and so
 * does one of a string whose units tell nothing themselves. A context is read as it was when first used: make a new
 * object when anything in it changes.
 * Returns what changed; `UNCHANGED` (the same object, nothing allocated) when nothing did.
 */
export function judgeFrame(memory: StringMemory, context: StringContext, frame: JudgedFrame): JudgeOutcome {
  const { atS, state: claims } = frame;
  if (atS < memory.atS || context.behaviour.kind === 'shutdown_only') return UNCHANGED;
  const { limits, units, command, light } = preparedFor(context, atS);
  const newCommand = takeCommand(memory, command);
  const { seen, settled } = memory;
  if (atS - memory.atS >= NIGHT_GAP_S) settled.fill(-1);
  const n = Math.min(context.slots.length, claims.length);

  const { unsettled, heard, outputs, outputSum, shown } = scanFrame(limits, frame, settled, seen);
  if (unsettled > 0)
    for (let i = 0; i < n; i++) {
      const shows = shown[i]!;
      if (shows === -1 || !context.slots[i]) continue;
      memory.claim[i] = claims[i]!;
      memory.measured[i] = shows & MEASURED ? 1 : 0;
      takeReport(memory, context, command, light, i, shows & 3, atS);
    }
  memory.atS = atS;
  if (heard > 0 && light.light === 'light' && (memory.stringFirst === 0 || memory.stringFirst < light.sinceS))
    memory.stringFirst = atS;
  if (outputs === units && units > 0) {
    memory.sumV = outputSum / 100;
    memory.sumAtS = atS;
    memory.sumAssumed = false;
  } else if (outputs === 0 && heard === units && units > 0 && outputFollowsClaim(context.behaviour)) {
    const sum = claimedSum(frame);
    if (sum !== null) {
      memory.sumV = sum;
      memory.sumAtS = atS;
      memory.sumAssumed = true;
    }
  }
  if (unsettled === 0 && !newCommand) return UNCHANGED;

  const changes: UnitChange[] = [];
  const asOf = Math.max(atS, memory.sweptAtS);
  for (let i = 0; i < n; i++) {
    if (!context.slots[i] || (!newCommand && (seen[i] !== atS || settled[i] !== -1))) continue;
    const reports = seen[i] === atS;
    const change = decide(memory, context, command, light, i, reports ? atS : asOf, asOf);
    if (change !== null) changes.push(change);
    if (reports) settle(memory, command, i);
  }
  return outcome(changes, newCommand ? endFinding(memory, atS) : null);
}

/** Notes what slot `i` would have to report to be as commanded and as before, so that the loop can pass it by. */
function settle(memory: StringMemory, command: Commanded, i: number): void {
  const output = memory.output[i]!;
  const claim = memory.claim[i]!;
  const passing = command.expects === 'passing' && output === SEEN_PASSING && memory.state[i] === PASSING;
  const followed =
    command.expects === 'shutdown' &&
    output === SEEN_SHUTDOWN &&
    memory.state[i] === SHUTDOWN &&
    memory.followedTo[i]! >= 0;
  const says = claim > 0 && claim < 4; // a claim of nothing or of fault is looked at each time
  memory.settled[i] =
    (passing || followed) && says && memory.verdict[i] === OK
      ? claim * 8 + output + (memory.measured[i] === 1 ? MEASURED : 0)
      : -1;
}

/**
 * Judges what time alone brings: silence, night and day, commands and their time limits. Updates `memory` in place.
 * `nowS` is event time: how far the logger's reports are known to have come, never the server's clock ahead of them
 * unless the logger is connected and quiet. A sweep that reaches back behind the newest frame changes nothing.
 */
export function sweepString(memory: StringMemory, context: StringContext, nowS: number): JudgeOutcome {
  if (nowS < memory.sweptAtS || nowS < memory.atS) return UNCHANGED;
  memory.sweptAtS = nowS;
  const { command, light } = preparedFor(context, nowS);
  const newCommand = takeCommand(memory, command);
  let changes: UnitChange[] | null = null;
  for (let i = 0; i < context.slots.length; i++) {
    if (!context.slots[i]) continue;
    const change = decide(memory, context, command, light, i, nowS, nowS);
    if (change !== null) (changes ??= []).push(change);
  }
  return outcome(changes, newCommand ? endFinding(memory, nowS) : null);
}

function outcome(changes: UnitChange[] | null, finding: FindingChange | null): JudgeOutcome {
  if ((changes === null || changes.length === 0) && finding === null) return UNCHANGED;
  return { changes: changes ?? [], finding };
}

/** A finding rests on what was commanded: a new command ends it, and the next readings may make it again. */
function endFinding(memory: StringMemory, atS: number): FindingChange | null {
  memory.pending = '';
  memory.pendingCount = 0;
  if (memory.finding === null) return null;
  const before = memory.finding.kind;
  memory.finding = null;
  return { atS, finding: null, before };
}

/** Takes note of a new command in force; true when there is one. */
function takeCommand(memory: StringMemory, command: Commanded): boolean {
  if (memory.commandSince === command.sinceS && memory.commandExpects === command.expects) return false;
  memory.commandSince = command.sinceS;
  memory.commandExpects = command.expects;
  memory.followedFrom.fill(-1);
  memory.followedTo.fill(-1);
  memory.settled.fill(-1);
  return true;
}

/** Books one unit's report: what it shows, since when, how it followed, whether it flaps. */
function takeReport(
  memory: StringMemory,
  context: StringContext,
  command: Commanded,
  light: LightSpan,
  i: number,
  now: number,
  atS: number,
): void {
  const before = memory.output[i]!;
  const seenBefore = memory.seen[i]!;
  memory.seen[i] = atS;
  memory.settled[i] = -1;
  const state = memory.state[i];
  if (seenBefore === 0 || state === DARK || state === UNHEARD || atS - seenBefore >= NIGHT_GAP_S)
    memory.first[i] = atS;
  if (now === 0) return;

  if (command.expects === 'shutdown') {
    if (now === SEEN_SHUTDOWN && memory.followedTo[i]! < 0) {
      // a report that came before word of the command did still counts
      const shownAtS = before === SEEN_SHUTDOWN ? Math.max(memory.outputSince[i]!, command.sinceS) : atS;
      memory.followedFrom[i] = before === SEEN_PASSING ? Math.max(0, seenBefore - command.sinceS) : 0;
      memory.followedTo[i] = shownAtS - command.sinceS;
    } else if (now === SEEN_PASSING) {
      memory.followedFrom[i] = -1;
      memory.followedTo[i] = -1;
    }
  }
  if (now === before) return;
  memory.output[i] = now;
  memory.outputSince[i] = atS;
  if (before === 0 || light.light !== 'light') return;
  // a change that neither a command nor waking explains
  const { graceS, flapWindowS } = context.times;
  if (atS < command.sinceS + limitFor(context, command) + graceS || atS < memory.first[i]! + graceS) return;
  if (memory.flaps[i] === 0 || atS - memory.flapFrom[i]! > flapWindowS) {
    memory.flaps[i] = 1;
    memory.flapFrom[i] = atS;
  } else memory.flaps[i]!++;
}

/** Time limit of the command in force: the rule set's, or the unit's own where that is longer and nobody pressed. */
function limitFor(context: StringContext, command: Commanded): number {
  const { timeLimitS } = context.times;
  return command.inForce === 'initiator'
    ? timeLimitS
    : Math.max(timeLimitS, context.behaviour.commandLossAfterS);
}

/**
 * Concludes state and verdict of slot `i` from what is booked and applies them. `atS`: when a change is said to have
 * happened; `asOf`: how far time is known to have come.
 */
function decide(
  memory: StringMemory,
  context: StringContext,
  command: Commanded,
  light: LightSpan,
  i: number,
  atS: number,
  asOf: number,
): UnitChange | null {
  const stateBefore = memory.state[i]!;
  const verdictBefore = memory.verdict[i]!;
  const state = decideState(memory, context, light, i, asOf);
  const verdict = decideVerdict(memory, context, command, light, i, state, asOf);
  if (state === stateBefore && verdict === verdictBefore) return null;
  const due =
    state === SILENT && stateBefore !== SILENT && atS === asOf ? silentFrom(memory, context, i) : atS;
  const at = Math.max(Math.min(atS, due), memory.since[i]!);
  memory.state[i] = state;
  memory.verdict[i] = verdict;
  memory.settled[i] = -1;
  if (verdict !== verdictBefore || verdict === OK) memory.since[i] = at;
  return {
    slot: i,
    position: i + 1,
    atS: at,
    state: stateOf(state),
    stateBefore: stateOf(stateBefore),
    verdict: verdictOf(verdict),
    verdictBefore: verdictOf(verdictBefore),
    evidence: evidenceFor(memory, context, command, i, verdictOf(verdict)),
  };
}

const silentFrom = (memory: StringMemory, context: StringContext, i: number): number =>
  Math.max(memory.seen[i]!, context.heardAtS[i] ?? 0) +
  SILENT_AFTER_INTERVALS * context.times.reportIntervalS;

function decideState(
  memory: StringMemory,
  context: StringContext,
  light: LightSpan,
  i: number,
  asOf: number,
): number {
  if (context.behaviour.kind === 'shutdown_only') return NO_STATE;
  const { reportIntervalS, wakeGraceS, stringWakeGraceS } = context.times;
  const silentAfterS = SILENT_AFTER_INTERVALS * reportIntervalS;
  const seen = Math.max(memory.seen[i]!, context.heardAtS[i] ?? 0);
  const before = memory.state[i]!;
  if (seen === 0) return UNHEARD;
  if (asOf - seen < silentAfterS) {
    const output = memory.output[i]!;
    if (output === SEEN_PASSING) return PASSING;
    if (output === SEEN_SHUTDOWN) return SHUTDOWN;
    return memory.seen[i] === 0 ? UNHEARD : SILENT; // it spoke and said nothing of its state
  }
  if (before === SILENT) return SILENT;
  if (light.light !== 'light') return DARK;
  if (seen >= light.sinceS) return SILENT; // it was awake in this light
  // not awake yet today: missed once its neighbours are, or once the whole string should be
  const neighbours = memory.stringFirst >= light.sinceS && asOf - memory.stringFirst >= wakeGraceS;
  const late = asOf - light.sinceS >= stringWakeGraceS && !context.snowLikely;
  return neighbours || late ? SILENT : DARK;
}

function decideVerdict(
  memory: StringMemory,
  context: StringContext,
  command: Commanded,
  light: LightSpan,
  i: number,
  state: number,
  asOf: number,
): number {
  const before = memory.verdict[i]!;
  const seen = memory.seen[i]!;
  const { graceS, reportIntervalS, flapChanges, flapWindowS } = context.times;
  if (command.expects === 'shutdown') {
    const limitS = limitFor(context, command);
    const heldSince = before === NOT_SHUTTING_DOWN && memory.since[i]! >= command.sinceS;
    if (state === PASSING) {
      if (seen > command.sinceS + limitS || heldSince) return NOT_SHUTTING_DOWN;
    } else if (state === SHUTDOWN) {
      if (memory.followedFrom[i]! >= limitS) return LATE;
      if (seen >= command.sinceS) return OK;
    } else return heldSince ? NOT_SHUTTING_DOWN : UNCONFIRMED;
    // nothing said since the command: it has until the limit, and one report more
    return before === UNCONFIRMED || asOf >= command.sinceS + limitS + reportIntervalS ? UNCONFIRMED : OK;
  }
  if (command.expects === 'passing') {
    if (state === SHUTDOWN) {
      if (before === STUCK) return STUCK;
      const lightSince = light.light === 'light' ? light.sinceS : Infinity;
      const onset = Math.max(memory.first[i]!, command.sinceS, memory.outputSince[i]!, lightSince);
      if (seen >= onset + graceS) return STUCK;
    } else if (state !== PASSING) return before === STUCK ? STUCK : OK;
    const changedLately = asOf - memory.outputSince[i]! <= flapWindowS;
    return changedLately && memory.flaps[i]! >= flapChanges ? FLAPPING : OK;
  }
  return OK;
}
