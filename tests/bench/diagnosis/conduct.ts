import { causesOf } from '../../../src/domain/causes/causes';
import { NOT_MEASURED_BELOW, stringTruth } from './conduct-truth';
import type { ConductDay, ToExplain } from './conduct-scenarios';
import { Draw, DAY_S, build, unitTypeOf } from './plants';
import { Share, Tally } from './scoring';
import { Watch, type Watched } from './watch';

/** Runs one plant-day with the judgement of conduct and scores it. */

export interface ConductScore {
  stuck: Tally;
  notShuttingDown: Tally;
  /** Strings whose units report nothing: a whole string at a time, positions unknown. */
  stuckStrings: Tally;
  /** Of the strings of silent units that hold some, those that share an input: there no voltage tells. */
  stuckStringsUndecided: Share;
  notShuttingDownStrings: Tally;
  /** Faults explained rightly, among those whose verdict was given. */
  cause: Share;
  /** Regular reports of the unit until the verdict. */
  stuckReports: number[];
  notShuttingDownReports: number[];
  /** Within three reports, among all that could be seen. */
  stuckInThree: Share;
  notShuttingDownInThree: Share;
  wrongCauses: string[];
  oddities: string[];
}

export const newConductScore = (): ConductScore => ({
  stuck: new Tally(),
  notShuttingDown: new Tally(),
  stuckStrings: new Tally(),
  stuckStringsUndecided: new Share(),
  notShuttingDownStrings: new Tally(),
  cause: new Share(),
  stuckReports: [],
  notShuttingDownReports: [],
  stuckInThree: new Share(),
  notShuttingDownInThree: new Share(),
  wrongCauses: [],
  oddities: [],
});

/** Fewer reports of a fault than this give the judgement no chance: not scored. */
const REPORTS_TO_SCORE = 4;
const IN_REPORTS = 3;

/** What is true of one unit (or silent string) in one respect over the day, and what was said. */
class Course {
  /** Regular reports in a row while it was so, and since when. */
  reports = 0;
  sinceS = NaN;
  ever = false;
  saidS = NaN;
  saidReports = NaN;
  falseS = NaN;
  mostReports = 0;
  private nearly = false;

  get now(): boolean {
    return !Number.isNaN(this.sinceS);
  }

  so(is: boolean, heard: boolean, atS: number, nearly = false): void {
    this.nearly = nearly;
    if (!is) {
      this.reports = 0;
      this.sinceS = NaN;
      return;
    }
    if (Number.isNaN(this.sinceS)) this.sinceS = atS;
    this.ever = true;
    if (heard) this.reports++;
    this.mostReports = Math.max(this.mostReports, this.reports);
  }

  said(atS: number): void {
    if (Number.isNaN(this.sinceS) && !this.nearly) {
      if (Number.isNaN(this.falseS)) this.falseS = atS;
    } else if (Number.isNaN(this.saidS)) {
      this.saidS = this.nearly && Number.isNaN(this.sinceS) ? 0 : atS - this.sinceS;
      this.saidReports = this.reports;
    }
  }

  score(tally: Tally, inThree: Share | null, reports: number[] | null): void {
    tally.lookedAt++;
    if (!Number.isNaN(this.saidS)) {
      tally.hit(this.saidS);
      reports?.push(this.saidReports);
      inThree?.count(this.saidReports <= IN_REPORTS);
    } else if (this.mostReports >= REPORTS_TO_SCORE) {
      tally.missed++;
      inThree?.count(false);
    }
    if (!Number.isNaN(this.falseS)) tally.falseAlarms++;
  }
}

/** Seconds after a command that are looked at one by one. */
const CLOSE_LOOK_S = 45;

/** Runs plant-day `day` and adds what came of it to `score`. */
export function runConductDay(day: ConductDay, n: number, score: ConductScore): void {
  const { drawn } = day;
  const { plan, fromS } = drawn;
  const draw = new Draw(2_000_000 + n);
  const startS = fromS + 3 * 3600;
  const plant = build(drawn, day.faults, startS);
  plant.step(startS);
  const watch = new Watch(plant, draw, {
    lost: draw.oneOf([0, 0.005, 0.02]),
    cutOff: day.cutOff,
    skewS: draw.oneOf([0, 0, -40, 25, 90]),
    inverterLagS: draw.whole(0, 8),
  });
  const tellsNothing = unitTypeOf(plan).kind === 'shutdown_only';
  const courses = watch.strings.map((s) => ({
    stuck: (tellsNothing ? [0] : s.serials).map(() => new Course()),
    keeps: (tellsNothing ? [0] : s.serials).map(() => new Course()),
  }));
  const openSince = new Map<string, number>();
  const releasedSince = new Map<string, number>(plan.zones.map((z) => [z.name, startS]));
  const openings = [...day.openings];
  const asked = [...day.toExplain].sort((a, b) => a.askedS - b.askedS);

  const take = (): void => {
    for (const { string, outcome } of watch.news.splice(0)) {
      const c = courses[watch.strings.indexOf(string)]!;
      for (const change of outcome.changes) {
        if (tellsNothing || change.verdict === change.verdictBefore) continue;
        if (change.verdict === 'stuck') c.stuck[change.slot]!.said(plant.atS);
        if (change.verdict === 'not_shutting_down') c.keeps[change.slot]!.said(plant.atS);
      }
      const finding = outcome.finding?.finding ?? null;
      if (finding === null || outcome.finding?.before === finding.kind) continue;
      if (tellsNothing) {
        if (finding.kind === 'stuck_positions_unknown') c.stuck[0]!.said(plant.atS);
        if (finding.kind === 'not_shutting_down') c.keeps[0]!.said(plant.atS);
      } else if (finding.kind === 'not_shutting_down') {
        // position unknown: right while any unit of the string or, where it shares, of the input does
        const its = onInput(string).flatMap((k) => courses[k]!.keeps);
        (c.keeps.find((x) => x.now) ?? its.find((x) => x.now) ?? c.keeps[0]!).said(plant.atS);
      }
    }
  };
  const onInput = ({ plan: { inverter, input } }: Watched): number[] =>
    watch.strings.flatMap((s, k) => (s.plan.inverter === inverter && s.plan.input === input ? [k] : []));
  /** What is true now, for the courses. */
  const look = (regular: boolean): void => {
    watch.strings.forEach((s, k) => {
      const truth = stringTruth(plant, s.plan, openSince.get(s.plan.zone), releasedSince.get(s.plan.zone));
      const c = courses[k]!;
      if (!tellsNothing) {
        for (let i = 0; i < s.serials.length; i++) {
          const heard = regular && s.heardNow[i] === 1;
          c.stuck[i]!.so(truth.stuck[i]!, heard, plant.atS, truth.nearlyStuck[i]);
          c.keeps[i]!.so(truth.keeps[i]!, heard, plant.atS);
        }
        return;
      }
      c.stuck[0]!.so(truth.stuck.some(Boolean), regular, plant.atS, truth.nearlyStuck.some(Boolean));
      c.keeps[0]!.so(keepsOnInput(s), regular, plant.atS);
    });
  };
  /** A voltage on a shared input stands for any of its strings: each may be the one. */
  const keepsOnInput = (s: Watched): boolean =>
    onInput(s).some((k) => {
      const { plan: o } = watch.strings[k]!;
      const truth = stringTruth(plant, o, openSince.get(o.zone), releasedSince.get(o.zone));
      return truth.keeps.some(Boolean);
    });
  const close = (): void => {
    for (let k = 0; k < CLOSE_LOOK_S; k++) {
      const changed = plant.step(plant.atS + 1);
      watch.command();
      look(false);
      watch.changed(changed);
      if (plant.atS % plan.reportIntervalS === 0) report();
      take();
    }
  };
  const report = (): void => {
    watch.report();
    look(true);
  };

  const endS = fromS + DAY_S - 2 * 3600;
  while (plant.atS < endS) {
    const next = (Math.floor(plant.atS / plan.reportIntervalS) + 1) * plan.reportIntervalS;
    const turn = openings
      .flatMap((o) => [
        { atS: o.fromS, open: true, o },
        { atS: o.toS, open: false, o },
      ])
      .filter((t) => t.atS > plant.atS && t.atS <= next);
    if (turn.length > 0) {
      const atS = turn[0]!.atS;
      for (const t of turn.filter((x) => x.atS === atS)) {
        plant.commands.setInitiator(t.o.initiator, t.open, atS);
        for (const z of plan.zones.filter((x) => x.initiator === t.o.initiator)) {
          (t.open ? openSince : releasedSince).set(z.name, atS);
          (t.open ? releasedSince : openSince).delete(z.name);
        }
      }
      const changed = plant.step(atS);
      watch.command();
      watch.changed(changed);
      close();
      continue;
    }
    // at night there is nothing to look at closely
    const changed = plant.step(plant.now.elevation < -4 ? Math.max(next, plant.atS + 600) : next);
    watch.command();
    look(false);
    watch.changed(changed);
    report();
    take();
    while (asked[0] && asked[0].askedS <= plant.atS) explain(asked.shift()!, watch, score, n);
  }
  courses.forEach((c, k) => {
    const stuckTally = tellsNothing ? score.stuckStrings : score.stuck;
    const keepsTally = tellsNothing ? score.notShuttingDownStrings : score.notShuttingDown;
    c.stuck.forEach((x, i) => {
      if (tellsNothing && x.ever) {
        const open = onInput(watch.strings[k]!).length > 1 && Number.isNaN(x.saidS);
        score.stuckStringsUndecided.count(open);
        if (open) return;
      }
      x.score(stuckTally, tellsNothing ? null : score.stuckInThree, tellsNothing ? null : score.stuckReports);
      odd(score, x, n, 'stuck', watch.strings[k]!, i);
    });
    c.keeps.forEach((x, i) => {
      x.score(
        keepsTally,
        tellsNothing ? null : score.notShuttingDownInThree,
        tellsNothing ? null : score.notShuttingDownReports,
      );
      odd(score, x, n, 'not_shutting_down', watch.strings[k]!, i);
    });
  });
}

function odd(score: ConductScore, c: Course, n: number, what: string, s: Watched, i: number): void {
  const where = `day ${n} ${s.plan.unitType} ${s.plan.name}:${i + 1} ${what}`;
  if (!Number.isNaN(c.falseS)) score.oddities.push(`${where}: false at ${c.falseS}`);
  if (Number.isNaN(c.saidS) && c.mostReports >= REPORTS_TO_SCORE)
    score.oddities.push(`${where}: missed in ${c.mostReports} reports`);
  if (c.saidReports > IN_REPORTS) score.oddities.push(`${where}: said after ${c.saidReports} reports`);
}

/** Asks for causes and holds the answer against what was done to the plant. */
function explain(e: ToExplain, watch: Watch, score: ConductScore, n: number): void {
  const condition = watch.condition();
  const named = new Set(e.units);
  const showing = condition.strings.flatMap((s) => {
    if (s.kind === 'shutdown_only') return s.finding && named.has(`${s.name}:1`) ? [s.name] : [];
    return s.slots
      .filter(
        (slot) =>
          named.has(`${s.name}:${slot.position}`) &&
          (e.verdict === 'silent' ? slot.state === 'silent' : slot.verdict === e.verdict),
      )
      .map((slot) => `${s.name}:${slot.position}`);
  });
  if (showing.length < NOT_MEASURED_BELOW * countOf(e, condition)) return; // no verdict, nothing to explain
  // while a shutdown is commanded, silence reads unconfirmed
  const causes = causesOf(condition).filter(
    (c) => c.verdict === e.verdict || (e.verdict === 'silent' && c.verdict === 'unconfirmed'),
  );
  const right = causes.some((c) => {
    if (!e.parts.some((p) => p.kind === c.sharedPart?.kind && p.name === c.sharedPart.name)) return false;
    const covered = new Set(
      c.units.map((u) => (u.position === null ? u.stringName : `${u.stringName}:${u.position}`)),
    );
    return showing.filter((u) => covered.has(u)).length >= 0.9 * showing.length;
  });
  score.cause.count(right);
  if (!right)
    score.wrongCauses.push(
      `day ${n}: ${e.verdict} of ${e.parts.map((p) => `${p.kind} ${p.name}`).join(' or ')} (${showing.length} show it) was explained by ${causes.map((c) => `${c.sharedPart?.kind} ${c.sharedPart?.name} (${c.units.length})`).join(', ')}`,
    );
}

const countOf = (e: ToExplain, condition: ReturnType<Watch['condition']>): number =>
  condition.strings[0]?.kind === 'shutdown_only'
    ? new Set(e.units.map((u) => u.split(':')[0])).size
    : e.units.length;
