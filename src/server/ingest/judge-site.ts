import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import { judgeInput, type InputReading } from '../../domain/verdicts/conductors';
import {
  commandedSpans,
  judgementTimes,
  lightSpans,
  snowMayLie,
  timeLimitOf,
  type LightSpan,
  type StringContext,
} from '../../domain/verdicts/context';
import { UNCHANGED, type JudgeOutcome } from '../../domain/verdicts/evidence';
import { thresholdsOf } from '../../domain/settings/thresholds';
import { judgeFrame, sweepString } from '../../domain/verdicts/judge';
import type { JudgedFrame } from '../../domain/verdicts/observe';
import {
  newMemory,
  NO_STATE,
  resetSlot,
  resizeMemory,
  type StringMemory,
} from '../../domain/verdicts/memory';
import { config } from '../config';
import type { KeptJudgement } from '../queries/judgement';
import type { JudgedSite, JudgedString } from '../queries/judgement-contexts';

const DAY_S = 86_400;
/** Light is worked out for so long before and after now, and again when half of it is used up. */
const LIGHT_BEFORE_S = 3 * DAY_S;
const LIGHT_AFTER_S = 2 * DAY_S;

/** One string as this process judges it. */
export interface JudgedNow {
  string: JudgedString;
  context: StringContext;
  memory: StringMemory;
  /** Evidence of the units whose verdict is not ok, by position. */
  evidence: Record<number, unknown>;
  /** `memory` differs from what is in the database. */
  dirty: boolean;
}

export interface Outcome {
  judged: JudgedNow;
  outcome: JudgeOutcome;
}

/**
 * The judgement of one site in memory: a context and a memory for each string. Frames are judged after they are
 * durable, so everything here can be made again from the database.
 */
export class SiteJudge {
  readonly strings = new Map<number, JudgedNow>();
  /** Its memory is no longer what the database will be asked to keep: nothing of it may be written. */
  dead = false;
  /** Frames are being read back; those that come meanwhile are read back too, for they must be judged in order. */
  catchingUp = false;
  missed = false;
  /** Epoch s when the air was last looked at for snow. */
  airLookedAtS = 0;
  private snow = false;
  private light: LightSpan[] = [];
  private lightUntilS = 0;

  constructor(
    public site: JudgedSite,
    kept: readonly KeptJudgement[],
    nowS: number,
  ) {
    const memories = new Map(kept.map((k) => [k.stringId, k.kept]));
    const oldest = Math.min(nowS, ...kept.map((k) => k.kept?.memory.atS || nowS));
    this.makeLight(Math.max(oldest - DAY_S, nowS - 95 * DAY_S), nowS);
    for (const string of site.strings) {
      const context = this.contextOf(string);
      const before = memories.get(string.id);
      const judged: JudgedNow = {
        string,
        context,
        memory: before?.memory ?? newMemory(context),
        evidence: {},
        dirty: !before,
      };
      if (before) this.exchange(judged, before.serials);
      this.strings.set(string.id, judged);
    }
  }

  get reportIntervalS(): number {
    return this.site.reportIntervalS;
  }

  /**
   * The plant or what it was told has changed: new contexts, the memories stay but for exchanged units. Gives the strings
   * of which something else is known now: they are to be written down at once.
   */
  setSite(site: JudgedSite, nowS: number): JudgedNow[] {
    const anew: JudgedNow[] = [];
    this.site = site;
    if (nowS > this.lightUntilS - LIGHT_AFTER_S / 2) this.makeLight(nowS - LIGHT_BEFORE_S, nowS);
    const before = new Map(this.strings);
    this.strings.clear();
    for (const string of site.strings) {
      const context = this.contextOf(string);
      const old = before.get(string.id);
      if (!old) {
        const judged = { string, context, memory: newMemory(context), evidence: {}, dirty: true };
        this.strings.set(string.id, judged);
        anew.push(judged);
        continue;
      }
      const judged = { ...old, string, context };
      if (this.exchange(judged, old.string.serials)) anew.push(judged);
      this.strings.set(string.id, judged);
    }
    return anew;
  }

  /** Takes the air temperature (°C) in: where it makes or ends the chance of snow the strings are judged anew. */
  takeAir(temperatureAir: number | null, nowS: number): void {
    this.airLookedAtS = nowS;
    const snow = snowMayLie(this.snow, temperatureAir);
    if (snow === this.snow) return;
    this.snow = snow;
    this.setSite(this.site, nowS);
  }

  frame(stringId: number, frame: JudgedFrame): Outcome | null {
    const judged = this.strings.get(stringId);
    if (!judged || frame.atS < judged.memory.atS) return null;
    judged.dirty = true;
    return taken(judged, judgeFrame(judged.memory, judged.context, ofItsUnits(judged.string, frame)));
  }

  sweep(judged: JudgedNow, nowS: number): Outcome | null {
    if (nowS > this.lightUntilS - DAY_S) this.setSite(this.site, nowS);
    return taken(judged, sweepString(judged.memory, judged.context, nowS));
  }

  input(judged: JudgedNow, reading: InputReading): Outcome | null {
    const { pending, pendingCount } = judged.memory;
    const outcome = judgeInput(judged.memory, judged.context, reading);
    if (judged.memory.pending !== pending || judged.memory.pendingCount !== pendingCount) judged.dirty = true;
    return taken(judged, outcome);
  }

  private contextOf(string: JudgedString): StringContext {
    const { site } = this;
    const behaviour = site.behaviours.get(string.unitTypeId);
    if (!behaviour) throw new Error(`unit type ${string.unitTypeId} of string ${string.id} is missing`);
    const { timeLimitS, source } = timeLimitOf(site.ruleSet);
    const graceS = config().STUCK_GRACE_S ?? thresholdsOf(site.thresholds).stuckGraceS;
    const times = judgementTimes(site.reportIntervalS, timeLimitS);
    const transmitters = string.transmitterIds.flatMap((id) => {
      const t = site.transmitters.get(id);
      return t ? [{ own: t.own, zone: site.zones.get(t.zoneId) ?? [] }] : [];
    });
    return {
      behaviour,
      times: graceS === null ? times : { ...times, graceS },
      timeLimitSource: source,
      slots: string.serials.map((serial) => serial !== null),
      heardAtS: string.heardAtS,
      commands: commandedSpans(behaviour, site.stage, site.zones.get(string.zoneId) ?? [], transmitters),
      light: this.light,
      snowLikely: this.snow,
    };
  }

  /** Forgets what was known of units that are others now; false: none is. */
  private exchange(judged: JudgedNow, before: readonly (string | null)[]): boolean {
    let exchanged = false;
    if (judged.memory.state.length !== judged.string.serials.length) {
      resizeMemory(judged.memory, judged.context);
      for (const position of Object.keys(judged.evidence))
        if (Number(position) > judged.string.serials.length) delete judged.evidence[Number(position)];
      exchanged = true;
    }
    const tells = judged.context.behaviour.kind !== 'shutdown_only';
    judged.string.serials.forEach((serial, slot) => {
      // of a type that tells nothing there is no state, of any other there is one: the string's type may have changed
      const fits = serial === null || (judged.memory.state[slot] !== NO_STATE) === tells;
      if (fits && serial === (before[slot] ?? null)) return;
      resetSlot(judged.memory, judged.context, slot);
      delete judged.evidence[slot + 1];
      exchanged = true;
    });
    judged.dirty ||= exchanged;
    return exchanged;
  }

  private makeLight(fromS: number, nowS: number): void {
    const place = {
      latitude: this.site.latitude,
      longitude: this.site.longitude,
      altitude: this.site.altitude,
    };
    this.lightUntilS = nowS + LIGHT_AFTER_S;
    this.light = lightSpans(
      (atS) => solarPositionQuick(atS * 1000, place).apparentElevation,
      fromS,
      this.lightUntilS,
    );
  }
}

/** A frame without what was reported from a slot before its unit came there: that is another's. */
function ofItsUnits(string: JudgedString, frame: JudgedFrame): JudgedFrame {
  if (string.newestPlacedS <= frame.atS) return frame;
  return {
    ...frame,
    state: frame.state.map((claim, slot) => ((string.placedAtS[slot] ?? 0) > frame.atS ? null : claim)),
  };
}

/** Books the evidence of what changed; null where nothing did. */
function taken(judged: JudgedNow, outcome: JudgeOutcome): Outcome | null {
  if (outcome === UNCHANGED) return null;
  for (const change of outcome.changes)
    if (change.verdict === 'ok') delete judged.evidence[change.position];
    else judged.evidence[change.position] = change.evidence;
  judged.dirty = true;
  return { judged, outcome };
}
