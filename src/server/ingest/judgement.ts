import { randomUUID } from 'node:crypto';
import type pg from 'pg';
import { connect, database } from '../db/pools';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import {
  framesAfter,
  inputsOf,
  judgementsOf,
  releaseSites,
  takeSites,
  temperatureAirOf,
  type InputRead,
} from '../queries/judgement';
import { judgedSite } from '../queries/judgement-contexts';
import { UNCHANGED } from '../../domain/verdicts/evidence';
import { seenPassing } from '../../domain/verdicts/conductors';
import { servedElsewhere } from '../queries/ingest-loggers';
import { thisProcess } from '../process';
import { CHANNELS, sendNotices } from '../queries/live-notices';
import type { Batch } from './batch';
import { expectedModules } from './expected-modules';
import { JudgeWriter } from './judge-writer';
import { SiteJudge, type Outcome } from './judge-site';
import type { Notices } from './notices';
import { eventTime, type Progress } from './progress';
import type { Written } from './write-batch';

const SWEEP_EVERY_MS = 10_000;
const AIR_EVERY_S = 300;
/** What is known of other processes' loggers is asked for again after this, seconds. */
const ELSEWHERE_FRESH_S = 5;
const FRAMES_A_READ = 400;
/** A string that was never judged is judged from so long ago on, seconds. */
const FIRST_LOOK_BACK_S = 6 * 3600;

export interface LoggerProgress {
  /** Wall-clock ms of its newest message. */
  spokeAt: number;
  newestS: number;
  waiting: boolean;
}

export interface JudgementHost {
  notices: Notices;
  /** Of a logger that this process serves. */
  progressOf: (loggerId: number) => LoggerProgress | undefined;
}

/**
 * Judges what ingest wrote, after COMMIT and on event time. A site is judged by one process at a time, under a lock
 * that lives with this process's connection. The watermark is `string_judgement.frame_at`: whatever was durable and
 * not judged when a process died is read back and judged in order by the next.
 */
export class Judgement {
  readonly id = randomUUID();
  private readonly sites = new Map<number, SiteJudge>();
  /** Sites whose lock is held; they are in `sites` once they are read. */
  private readonly held = new Set<number>();
  private readonly stale = new Set<number>();
  private readonly judgedInputs = new Map<number, number>();
  private readonly refreshing = new Map<
    number,
    { current: Promise<void>; next?: Promise<void> | undefined }
  >();
  private readonly writer: JudgeWriter;
  private lock: pg.Client | undefined;
  private timer: NodeJS.Timeout | undefined;
  private turn: Promise<void> = Promise.resolve();
  private stopping = false;
  private readonly startedS = Math.floor(Date.now() / 1000);
  private readonly lastServedS = new Map<number, number>();
  /** Loggers of other processes and when they last spoke, as of `atS`. */
  private elsewhere: { atS: number; spokeS: ReadonlyMap<number, number> } = { atS: 0, spokeS: new Map() };

  constructor(private readonly host: JudgementHost) {
    this.writer = new JudgeWriter({
      lost: (siteIds) => {
        for (const id of siteIds) {
          this.forget(id);
          this.stale.add(id);
        }
      },
      heard: (siteIds) => {
        for (const id of siteIds) this.reload(id);
      },
    });
  }

  start(): void {
    // reading sites back may take a while: loggers need not wait for it
    void this.enqueue(() => this.takeFreeSites());
    this.timer = setInterval(() => void this.enqueue(() => this.sweep()), SWEEP_EVERY_MS);
  }

  async stop(): Promise<void> {
    this.stopping = true;
    clearInterval(this.timer);
    await this.turn;
    await Promise.all([...this.refreshing.values()].map((r) => r.next ?? r.current));
    for (const site of this.sites.values()) this.writer.checkpoint(site, true);
    await this.writer.stop();
    const { lock } = this;
    this.lock = undefined;
    if (!lock) return;
    try {
      // given back by word: the end of a connection may take the server a moment
      await releaseSites(lock);
      await lock.end();
    } catch (error) {
      if (!isDatabaseAway(error)) throw error; // the locks went with the connection
    }
  }

  /** Sites that this process judges, and those among them that are being caught up with. */
  figures(): { sitesJudged: number; sitesBehind: number } {
    let sitesBehind = 0;
    for (const site of this.sites.values()) if (site.catchingUp) sitesBehind++;
    return { sitesJudged: this.sites.size, sitesBehind };
  }

  /** The plant or its commands changed, or another process wrote frames: reads the site again. */
  reload(siteId: number): void {
    void this.refresh(siteId);
  }

  /** After COMMIT: judges the frames of a batch and tells what is new. */
  async written(batch: Batch, written: Written): Promise<void> {
    for (const siteId of written.contexts) await this.refresh(siteId);
    const outcomes: { site: SiteJudge; outcome: Outcome }[] = [];
    const elsewhere = new Set<number>();
    for (const row of batch.frames) {
      const site = this.sites.get(row.siteId);
      if (!site) {
        if (!this.held.has(row.siteId)) elsewhere.add(row.siteId);
        continue;
      }
      if (site.catchingUp) {
        site.missed = true;
        continue;
      }
      const outcome = site.frame(row.stringId, {
        atS: row.at,
        state: row.state,
        voltageOut: row.voltage,
        voltageIn: row.voltageIn ?? undefined,
      });
      if (outcome) outcomes.push({ site, outcome });
    }
    if (outcomes.length > 0) {
      for (const { outcome } of outcomes) written.strings.add(outcome.judged.string.id);
      for (const { site } of outcomes) written.sites.add(site.site.id);
      await this.writer.write(outcomes);
    }
    this.host.notices.changed(written.sites, written.strings);
    if (elsewhere.size > 0)
      await sendNotices(
        database('ingest'),
        [...elsewhere].map((site) => ({
          channel: CHANNELS.written,
          payload: JSON.stringify({ site, by: this.id }),
        })),
      );
  }

  /** One thing at a time: reading sites, sweeping. */
  private enqueue(work: () => Promise<void>): Promise<void> {
    this.turn = this.turn.then(() => this.guarded(work));
    return this.turn;
  }

  private async guarded(work: () => Promise<void>): Promise<void> {
    try {
      await work();
    } catch (error) {
      if (isDatabaseAway(error)) log.warn('judgement waits: the database is away');
      else log.error({ error }, 'judgement failed; it is tried again with the next sweep');
    }
  }

  private async takeFreeSites(): Promise<void> {
    if (!this.lock) {
      const lock = await connect('ingest');
      lock.once('end', () => {
        if (this.lock !== lock) return;
        // without the connection the locks are gone: another process may judge these sites now
        this.lock = undefined;
        for (const id of [...this.sites.keys()]) this.forget(id);
        this.held.clear();
      });
      this.lock = lock;
    }
    const { lock } = this;
    for (const id of await takeSites(lock, [...this.held])) this.held.add(id);
    for (const id of this.held) if (!this.sites.has(id) && !this.stopping) await this.read(id);
  }

  /** Reads a site's judgement back and catches up with its frames. */
  private async read(siteId: number): Promise<void> {
    const db = database('ingest');
    const site = await judgedSite(db, siteId);
    if (!site) {
      this.held.delete(siteId);
      return;
    }
    const nowS = Math.floor(Date.now() / 1000);
    const judge = new SiteJudge(site, await judgementsOf(db, siteId), nowS);
    judge.catchingUp = true;
    this.sites.set(siteId, judge);
    await this.catchUp(judge, nowS);
    this.writer.checkpoint(judge, true);
    await this.writer.flush();
  }

  private forget(siteId: number): void {
    const judge = this.sites.get(siteId);
    if (judge) judge.dead = true;
    this.sites.delete(siteId);
  }

  /** Reads a site's plant and commands again, judges what was not judged, and sweeps. One at a time for each site. */
  private refresh(siteId: number): Promise<void> {
    const waiting = this.refreshing.get(siteId);
    if (waiting?.next) return waiting.next;
    const run = async (): Promise<void> => {
      const judge = this.sites.get(siteId);
      if (!judge || judge.dead) return;
      const site = await judgedSite(database('ingest'), siteId);
      if (!site) {
        this.forget(siteId);
        return;
      }
      const nowS = Math.floor(Date.now() / 1000);
      const anew = judge.setSite(site, nowS);
      if (!judge.catchingUp) await this.catchUp(judge, nowS);
      // a page must not show of a new unit what was known of the one before
      await this.keep(
        judge,
        anew.map((judged) => ({ site: judge, outcome: { judged, outcome: UNCHANGED } })),
      );
      const inputs = await inputsOf(database('ingest'), [siteId]);
      await this.sweepSite(judge, inputs.get(siteId) ?? [], nowS);
    };
    const entry = waiting ?? { current: Promise.resolve() };
    const next = entry.current.then(() => {
      entry.next = undefined;
      entry.current = this.guarded(run);
      return entry.current;
    });
    entry.next = next;
    this.refreshing.set(siteId, entry);
    return next;
  }

  /** Judges the frames that are durable and not judged, each string's in order. */
  private async catchUp(judge: SiteJudge, nowS: number): Promise<void> {
    judge.catchingUp = true;
    try {
      do {
        judge.missed = false;
        await this.judgeStored(judge, nowS);
      } while (judge.missed && !this.stopping);
    } catch (error) {
      // half caught up it must not judge what comes next: it is read again from its watermark
      this.forget(judge.site.id);
      this.stale.add(judge.site.id);
      throw error;
    }
    judge.catchingUp = false;
  }

  private async judgeStored(judge: SiteJudge, nowS: number): Promise<void> {
    const firstLook = nowS - FIRST_LOOK_BACK_S;
    const behind = new Map([...judge.strings.values()].map((j) => [j.string.id, j.memory.atS || firstLook]));
    while (behind.size > 0 && !this.stopping && !judge.dead) {
      const frames = await framesAfter(
        database('ingest'),
        [...behind].map(([stringId, atS]) => ({ stringId, atS })),
        FRAMES_A_READ,
      );
      const read = new Map<number, number>();
      const outcomes: { site: SiteJudge; outcome: Outcome }[] = [];
      for (const f of frames) {
        read.set(f.stringId, (read.get(f.stringId) ?? 0) + 1);
        behind.set(f.stringId, f.at);
        const outcome = judge.frame(f.stringId, {
          atS: f.at,
          state: f.state,
          voltageOut: f.voltage,
          voltageIn: f.voltageIn ?? undefined,
        });
        if (outcome) outcomes.push({ site: judge, outcome });
      }
      await this.keep(judge, outcomes);
      for (const id of [...behind.keys()]) if ((read.get(id) ?? 0) < FRAMES_A_READ) behind.delete(id);
    }
  }

  private async keep(
    judge: SiteJudge,
    outcomes: readonly { site: SiteJudge; outcome: Outcome }[],
  ): Promise<void> {
    if (outcomes.length === 0) return;
    await this.writer.write(outcomes);
    this.host.notices.changed(
      [judge.site.id],
      outcomes.map((o) => o.outcome.judged.string.id),
    );
  }

  private async sweep(): Promise<void> {
    await this.takeFreeSites();
    for (const id of [...this.stale]) {
      this.stale.delete(id);
      if (this.held.has(id)) await this.read(id);
    }
    const inputs = await inputsOf(database('ingest'), [...this.sites.keys()]);
    const nowS = Math.floor(Date.now() / 1000);
    for (const judge of [...this.sites.values()]) {
      if (this.stopping) return;
      if (judge.dead || judge.catchingUp) continue;
      await this.sweepSite(judge, inputs.get(judge.site.id) ?? [], nowS);
      this.writer.checkpoint(judge, false);
    }
    await this.writer.flush();
  }

  private async sweepSite(judge: SiteJudge, inputs: readonly InputRead[], nowS: number): Promise<void> {
    if (nowS - judge.airLookedAtS >= AIR_EVERY_S)
      judge.takeAir(await temperatureAirOf(database('ingest'), judge.site.id), nowS);
    const progress = await this.progressOf(judge, inputs, nowS);
    const outcomes: { site: SiteJudge; outcome: Outcome }[] = [];
    for (const judged of [...judge.strings.values()]) {
      const atS = eventTime(progress(judged.string.loggerId), judge.reportIntervalS, nowS);
      if (atS === null) continue;
      const outcome = judge.sweep(judged, atS);
      if (outcome) outcomes.push({ site: judge, outcome });
    }
    outcomes.push(...(await this.judgeInputs(judge, inputs)));
    await this.keep(judge, outcomes);
  }

  /** Judges the input readings that came since the last sweep. */
  private async judgeInputs(
    judge: SiteJudge,
    inputs: readonly InputRead[],
  ): Promise<{ site: SiteJudge; outcome: Outcome }[]> {
    const outcomes: { site: SiteJudge; outcome: Outcome }[] = [];
    const fresh = inputs.filter((i) => i.atS > (this.judgedInputs.get(i.inputId) ?? 0));
    if (fresh.length === 0) return outcomes;
    const modules = await expectedModules(judge);
    for (const input of fresh) {
      this.judgedInputs.set(input.inputId, input.atS);
      const onInput = [...judge.strings.values()].filter((j) => j.string.inputId === input.inputId);
      const passing = onInput.map((j) => seenPassing(j.memory, j.context, input.atS));
      const allPassing = passing.reduce((a, b) => a + b, 0);
      for (const [k, judged] of onInput.entries()) {
        const outcome = judge.input(judged, {
          atS: input.atS,
          voltageV: input.voltageV,
          currentA: input.currentA,
          strings: onInput.length,
          othersPassing: allPassing - (passing[k] ?? 0),
          module: modules.get(judged.string.id) ?? null,
        });
        if (outcome) outcomes.push({ site: judge, outcome });
      }
    }
    return outcomes;
  }

  /**
   * How far the reports of each logger are known to have come. One that another process serves is followed too, by what
   * is stored of it: while it brings what it kept through an outage, nothing of its past is over yet.
   */
  private async progressOf(
    judge: SiteJudge,
    inputs: readonly InputRead[],
    nowS: number,
  ): Promise<(loggerId: number | null) => Progress> {
    if (nowS - this.elsewhere.atS >= ELSEWHERE_FRESH_S)
      this.elsewhere = { atS: nowS, spokeS: await servedElsewhere(database('ingest'), thisProcess().id) };
    const inputS = new Map(inputs.map((i) => [i.inputId, i.atS]));
    return (loggerId) => {
      if (loggerId === null) return { served: false, sinceS: this.startedS };
      const here = this.host.progressOf(loggerId);
      const spokeS = here ? Math.floor(here.spokeAt / 1000) : this.elsewhere.spokeS.get(loggerId);
      if (spokeS === undefined)
        return { served: false, sinceS: this.lastServedS.get(loggerId) ?? this.startedS };
      this.lastServedS.set(loggerId, nowS);
      if (here) return { ...here, served: true, spokeS };
      let newestS = 0;
      for (const { string, memory } of judge.strings.values())
        if (string.loggerId === loggerId)
          newestS = Math.max(newestS, memory.atS, inputS.get(string.inputId) ?? 0);
      return { served: true, spokeS, newestS, waiting: false };
    };
  }
}
