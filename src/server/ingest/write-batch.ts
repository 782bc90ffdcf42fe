import type pg from 'pg';
import { config } from '../config';
import { ensureDays, parkFrames, partitionDays, writeFrames } from '../queries/ingest-frames';
import { writeHeard } from '../queries/ingest-heard';
import {
  learnGateways,
  writeCommand,
  writeInputs,
  writeInverters,
  writeTrace,
  writeWeather,
} from '../queries/ingest-reports';
import type { Batch } from './batch';

/** Quarters that closed this long ago may have been rolled up: the job rolls up after 120 s. */
export const ROLLED_UP_AFTER_S = 90;
const DAY_S = 86_400;

/** Days since the epoch: every frame is asked for its day. */
const dayOf = (epochS: number): number => Math.floor(epochS / DAY_S);
const daysOf = (names: ReadonlySet<string>): Set<number> =>
  new Set(
    [...names].map(
      (n) => Date.UTC(Number(n.slice(0, 4)), Number(n.slice(4, 6)) - 1, Number(n.slice(6))) / 1000 / DAY_S,
    ),
  );

/** The days that take frames and those that take other reports, as far as this connection knows. */
export class Days {
  private frames: ReadonlySet<number> = new Set();
  private reports: ReadonlySet<number> = new Set();

  /** Makes today's neighbours where the job has not yet, and learns which days there are. */
  async refresh(client: pg.ClientBase, nowS: number): Promise<void> {
    await ensureDays(client, new Date((nowS - DAY_S) * 1000), new Date((nowS + DAY_S) * 1000));
    await this.learn(client);
  }

  private async learn(client: pg.ClientBase): Promise<void> {
    const { frames, reports } = await partitionDays(client);
    this.frames = daysOf(frames);
    this.reports = daysOf(reports);
  }

  /** False for a day that is packed, or has no partition. */
  takesFrames(epochS: number): boolean {
    return this.frames.has(dayOf(epochS));
  }

  takesReports(epochS: number): boolean {
    return this.reports.has(dayOf(epochS));
  }

  /** Makes the partitions of these reports' times where they lie within what is kept. */
  async ensure(client: pg.ClientBase, times: readonly number[], nowS: number): Promise<void> {
    const missing = new Map<number, number>();
    for (const at of times) if (!this.takesReports(at)) missing.set(dayOf(at), at);
    for (const at of missing.values())
      if (at > nowS - config().RAW_KEPT_DAYS * DAY_S)
        await ensureDays(client, new Date(at * 1000), new Date(at * 1000));
    if (missing.size > 0) await this.learn(client);
  }
}

/** How far the time at which a gateway was last heard may lag behind, seconds. */
const GATEWAY_LAG_S = 15;

/** Which gateways were written down as heard, and when: most batches say nothing new of them. */
export class GatewaysHeard {
  private readonly at = new Map<string, number>();

  news(rows: Batch['gateways']): Batch['gateways'] {
    return rows.filter((r) => {
      const known = this.at.get(`${r.loggerId} ${r.number}`);
      return known === undefined || r.heardAt >= known + GATEWAY_LAG_S;
    });
  }

  told(rows: Batch['gateways']): void {
    for (const r of rows) {
      const key = `${r.loggerId} ${r.number}`;
      this.at.set(key, Math.max(r.heardAt, this.at.get(key) ?? 0));
    }
  }
}

export interface Written {
  /** Sites where something other than frames changed, and strings whose frames or traces are new. */
  sites: Set<number>;
  strings: Set<number>;
  /** Sites whose commands or heard units changed: what judgement rests on must be read again. */
  contexts: Set<number>;
}

/**
 * Makes a batch durable, statement by statement, each one committed by itself and harmless when repeated: after an
 * error the whole batch may be written again. Frames of days without a partition are parked for the merge job.
 */
export async function writeBatch(
  client: pg.ClientBase,
  batch: Batch,
  days: Days,
  gatewaysHeard: GatewaysHeard,
  nowS: number,
): Promise<Written> {
  const written: Written = { sites: new Set(), strings: new Set(), contexts: new Set() };
  const { inputs, inverters, weather } = batch;
  const gateways = gatewaysHeard.news(batch.gateways);
  if (gateways.length > 0) await learnGateways(client, gateways);
  gatewaysHeard.told(gateways);
  if (batch.frames.length > 0) {
    const present = batch.frames.filter((f) => days.takesFrames(f.at));
    if (present.length < batch.frames.length)
      await parkFrames(
        client,
        batch.frames.filter((f) => !days.takesFrames(f.at)),
      );
    if (present.length > 0) await writeFrames(client, present, new Date((nowS - ROLLED_UP_AFTER_S) * 1000));
    for (const f of present) written.strings.add(f.stringId);
  }
  const times = [...inputs, ...inverters, ...weather].map((r) => r.at);
  if (times.length > 0) await days.ensure(client, times, nowS);
  const kept = <T extends { at: number }>(rows: readonly T[]): T[] =>
    rows.filter((r) => days.takesReports(r.at));
  if (inputs.length > 0) await writeInputs(client, kept(inputs));
  if (inverters.length > 0)
    for (const site of await writeInverters(client, kept(inverters))) written.sites.add(site);
  if (weather.length > 0) await writeWeather(client, kept(weather));
  for (const r of [...inputs, ...inverters, ...weather]) written.sites.add(r.siteId);
  if (batch.heard.length > 0)
    for (const { siteId, stringId } of await writeHeard(client, batch.heard)) {
      written.contexts.add(siteId);
      written.sites.add(siteId);
      if (stringId !== null) written.strings.add(stringId);
    }
  for (const command of batch.commands)
    if (await writeCommand(client, command)) {
      written.contexts.add(command.siteId);
      written.sites.add(command.siteId);
    }
  for (const trace of batch.traces) {
    await writeTrace(client, trace);
    written.strings.add(trace.stringId);
  }
  return written;
}
