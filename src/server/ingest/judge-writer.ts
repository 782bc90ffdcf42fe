import type pg from 'pg';
import { connect } from '../db/pools';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { hearReportingUnits, writeJudgements, type EventRow, type UnitEventRow } from '../queries/judgement';
import { eventRows, judgementRow, mergeUnitEvents, unitEventRows } from './judge-rows';
import type { JudgedNow, Outcome, SiteJudge } from './judge-site';

export interface WriterHooks {
  /** What was concluded of these sites could not be kept: they must be read again. */
  lost: (siteIds: Iterable<number>) => void;
  /** Units of these sites were heard for the first time. */
  heard: (siteIds: Iterable<number>) => void;
}

/** How often memories that changed nothing are kept, so that a restart has little to judge again. */
const CHECKPOINT_EVERY_S = 120;
const STRINGS_A_WRITE = 1000;
/** Checkpoints come in small portions, so that news never waits long behind them. */
const CHECKPOINTS_A_WRITE = 100;

/** Keeps what judgement concludes. While one transaction runs, the next one gathers: everybody's conclusions go together. */
export class JudgeWriter {
  /** What changed, and what is only kept so that a restart has less to do: it gives way. */
  private readonly strings = new Map<number, { judged: JudgedNow; siteId: number }>();
  private readonly checkpoints = new Map<number, { judged: JudgedNow; siteId: number }>();
  private unitEvents: UnitEventRow[] = [];
  private events: EventRow[] = [];
  private heard = new Map<number, number>();
  private running: Promise<void> | undefined;
  private client: pg.Client | undefined;
  private checkpointedS = new Map<number, number>();

  constructor(private readonly hooks: WriterHooks) {}

  /** Resolves when these outcomes are durable, or given up and marked to be concluded again. */
  async write(outcomes: readonly { site: SiteJudge; outcome: Outcome }[]): Promise<void> {
    for (const { site, outcome } of outcomes) {
      if (site.dead) continue;
      const siteId = site.site.id;
      this.strings.set(outcome.judged.string.id, { judged: outcome.judged, siteId });
      this.unitEvents.push(...unitEventRows(outcome, siteId));
      this.events.push(...eventRows(outcome, site.site));
      if (outcome.outcome.changes.some((c) => c.stateBefore === 'unheard'))
        this.heard.set(outcome.judged.string.id, siteId);
    }
    await this.writeNews();
  }

  /** Marks the memories of a site to be kept with the next write. */
  checkpoint(site: SiteJudge, now: boolean): void {
    const nowS = Math.floor(Date.now() / 1000);
    const siteId = site.site.id;
    if (site.dead) return;
    if (!now && nowS - (this.checkpointedS.get(siteId) ?? 0) < CHECKPOINT_EVERY_S) return;
    this.checkpointedS.set(siteId, nowS);
    for (const judged of site.strings.values())
      if (judged.dirty) this.checkpoints.set(judged.string.id, { judged, siteId });
  }

  /** Writes everything, checkpoints too. */
  async flush(): Promise<void> {
    await this.writeNews();
    while (this.checkpoints.size > 0) await this.writeOnce();
  }

  private async writeNews(): Promise<void> {
    while (this.strings.size + this.events.length + this.unitEvents.length > 0) await this.writeOnce();
    await this.running;
  }

  private writeOnce(): Promise<void> {
    return (this.running ??= this.writeGathered().finally(() => {
      this.running = undefined;
    }));
  }

  async stop(): Promise<void> {
    await this.flush();
    await this.client?.end();
    this.client = undefined;
  }

  private async writeGathered(): Promise<void> {
    const taken = [...this.strings].slice(0, STRINGS_A_WRITE);
    for (const [id] of taken) {
      this.strings.delete(id);
      this.checkpoints.delete(id);
    }
    if (this.strings.size === 0)
      for (const checkpoint of [...this.checkpoints].slice(0, CHECKPOINTS_A_WRITE)) {
        taken.push(checkpoint);
        this.checkpoints.delete(checkpoint[0]);
      }
    // events of a string go with its judgement, or after it: never before
    const rest = new Set(this.strings.keys());
    const ready = <T extends { stringId: number | null }>(rows: T[]): [T[], T[]] => [
      rows.filter((r) => r.stringId === null || !rest.has(r.stringId)),
      rows.filter((r) => r.stringId !== null && rest.has(r.stringId)),
    ];
    const [unitEvents, laterUnitEvents] = ready(this.unitEvents);
    const [events, laterEvents] = ready(this.events);
    this.unitEvents = laterUnitEvents;
    this.events = laterEvents;
    const heard = [...this.heard];
    this.heard.clear();
    const rows = taken.map(([, { judged, siteId }]) => {
      judged.dirty = false;
      return judgementRow(judged, siteId);
    });
    try {
      this.client ??= await connect('ingest');
      await writeJudgements(this.client, rows, mergeUnitEvents(unitEvents), events);
      if (
        heard.length > 0 &&
        (await hearReportingUnits(
          this.client,
          heard.map(([id]) => id),
        )) > 0
      )
        this.hooks.heard(new Set(heard.map(([, siteId]) => siteId)));
    } catch (error) {
      if (!isDatabaseAway(error)) log.error({ error }, 'what was concluded could not be kept');
      const { client } = this;
      this.client = undefined;
      // the connection is broken, or no longer to be trusted
      await client?.end().catch(() => undefined);
      this.lose(new Set([...rows.map((r) => r.siteId), ...events.map((e) => e.siteId)]));
    }
  }

  /** What was gathered meanwhile rests on what was lost. */
  private lose(sites: ReadonlySet<number>): void {
    this.hooks.lost(sites);
    for (const waiting of [this.strings, this.checkpoints])
      for (const [id, { siteId }] of waiting) if (sites.has(siteId)) waiting.delete(id);
    this.unitEvents = this.unitEvents.filter((e) => !sites.has(e.siteId));
    this.events = this.events.filter((e) => !sites.has(e.siteId));
  }
}
