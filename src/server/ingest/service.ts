import { WebSocketServer } from 'ws';
import { database } from '../db/pools';
import { isDatabaseAway } from '../errors';
import { thisProcess } from '../process';
import { log } from '../log';
import { meters } from '../observe/meters';
import { Listener } from '../live/listener';
import {
  openRollCalls,
  releaseLeases,
  renewLeases,
  takeLease,
  tellLostLoggers,
  type KnownLogger,
} from '../queries/ingest-loggers';
import { CHANNELS, readLeased, readWritten } from '../queries/live-notices';
import { endedTokens, touchTokens } from '../queries/ingest-tokens';
import { currentRoster, rosterVersion } from '../queries/roster';
import type { Batch } from './batch';
import { Judgement, type LoggerProgress } from './judgement';
import { Notices } from './notices';
import { OverHttps } from './over-https';
import { Reports } from './progress';
import { Queue } from './queue';
import { Refusals } from './refusals';
import { Session, type SessionHost } from './session';
import type { Written } from './write-batch';

/** Messages larger than the protocol allows are still read up to here, so that the refusal can say so. */
const PAYLOAD_MAX_BYTES = 16 * 1024 * 1024;
const RENEW_EVERY_MS = 10_000;
/** A logger that nobody has served for so long is lost, seconds. */
const LOST_AFTER_S = 20;
/** How often it is written down that tokens are in use: every so many renewals of leases. */
const TOUCH_EVERY = 6;

/** Ingest of one process: its connections, the queue to the database, and the judgement of what was written. */
export class Ingest implements SessionHost {
  readonly process = thisProcess().id;
  readonly wss = new WebSocketServer({
    noServer: true,
    maxPayload: PAYLOAD_MAX_BYTES,
    skipUTF8Validation: true,
    perMessageDeflate: false,
  });
  readonly refusals = new Refusals();
  readonly overHttps: OverHttps;
  private readonly sessions = new Set<Session>();
  /** The session that serves each logger. */
  private readonly serving = new Map<number, Session>();
  private readonly notices = new Notices();
  private readonly reports = new Reports();
  private readonly judgement: Judgement;
  private readonly queue: Queue;
  private readonly listener: Listener;
  private renewTimer: NodeJS.Timeout | undefined;
  private renewals = 0;
  private upkeep: Promise<void> = Promise.resolve();
  private stopping = false;
  /** Readings made durable since the start. */
  readings = 0;

  constructor() {
    this.judgement = new Judgement({
      notices: this.notices,
      progressOf: (loggerId) => this.progressOf(loggerId),
    });
    this.queue = new Queue({
      written: (batch, written) => this.written(batch, written),
      followed: (items) => {
        for (const item of items) this.reports.left(item);
      },
      pressure: (paused) => this.pressure(paused),
      away: () => this.tellAll(5000),
    });
    this.overHttps = new OverHttps({
      enqueue: (item) => this.enqueue(item),
      refused: (loggerId, field, reason) => this.refusals.add(loggerId, field, reason),
      full: () => this.queue.paused,
      changed: (siteId) => this.notices.changed([siteId], []),
    });
    this.listener = new Listener(
      [CHANNELS.rollCall, CHANNELS.asBuilt, CHANNELS.leased, CHANNELS.written, CHANNELS.tokens],
      (channel, payload) => this.notice(channel, payload),
      () => this.catchUpWithNotices(),
    );
  }

  async start(): Promise<void> {
    await this.listener.start();
    this.judgement.start();
    this.renewTimer = setInterval(() => {
      this.upkeep = this.upkeep.then(() => this.renew());
    }, RENEW_EVERY_MS);
  }

  async stop(): Promise<void> {
    this.stopping = true;
    clearInterval(this.renewTimer);
    this.overHttps.stop();
    for (const { ws } of this.sessions)
      ws.close(1001, 'the server is going away; come back in a few seconds');
    await this.queue.stop();
    await this.listener.stop();
    await this.upkeep;
    await this.judgement.stop();
    await this.notices.stop();
    await this.refusals.stop();
    try {
      await releaseLeases(database('ingest'), this.process, [...this.serving.keys()]);
    } catch (error) {
      if (!isDatabaseAway(error)) throw error; // without a database leases run out by themselves
    }
    for (const { ws } of this.sessions) ws.terminate();
  }

  /** A connection whose token was good. */
  accept(session: Session): void {
    if (this.stopping) {
      session.end('unavailable', 'the server is going away');
      return;
    }
    this.sessions.add(session);
    if (this.queue.paused) session.setPaused(true);
  }

  figures(): {
    connections: number;
    loggers: number;
    waitingReadings: number;
    paused: boolean;
    pauses: number;
    unknownTokens: number;
    readings: number;
    sitesJudged: number;
    sitesBehind: number;
    listening: boolean;
  } {
    return {
      connections: this.sessions.size,
      loggers: this.serving.size,
      waitingReadings: this.queue.waitingReadings,
      paused: this.queue.paused,
      pauses: this.queue.pauses,
      unknownTokens: this.refusals.unknownTokens,
      readings: this.readings,
      ...this.judgement.figures(),
      listening: this.listener.listening,
    };
  }

  /** The most readings that waited at once since the last call. */
  takePeak(): number {
    return this.queue.takePeak();
  }

  // ---- what sessions ask for ----
  async arrived(session: Session, firmware: string): ReturnType<SessionHost['arrived']> {
    const { logger, address } = session;
    const before = this.serving.get(logger.id);
    if (before && before !== session)
      before.end('conflict', 'a newer connection of this logger took its place');
    this.serving.set(logger.id, session);
    const db = database('ingest');
    await takeLease(db, { loggerId: logger.id, process: this.process, address, firmware });
    await touchTokens(db, [{ tokenId: logger.tokenId, at: new Date(session.spokeAt), address }]);
    const roster = await currentRoster(db, { id: logger.id, siteId: logger.siteId });
    const open = await openRollCalls(db, [logger.siteId]);
    if (roster.changed) this.notices.changed([logger.siteId], []);
    return { message: roster.message, view: roster.view, listen: open.has(logger.siteId) };
  }

  rosterVersion(logger: KnownLogger, version: number): ReturnType<SessionHost['rosterVersion']> {
    return rosterVersion(database('ingest'), logger, version);
  }

  enqueue(item: Parameters<SessionHost['enqueue']>[0]): void {
    this.reports.joined(item);
    this.queue.add(item);
  }

  refused(loggerId: number, field: string, reason: string): void {
    this.refusals.add(loggerId, field, reason);
  }

  closed(session: Session): void {
    this.sessions.delete(session);
    if (this.serving.get(session.logger.id) !== session) return;
    this.serving.delete(session.logger.id);
    if (this.stopping) return;
    releaseLeases(database('ingest'), this.process, [session.logger.id])
      .then(() => this.notices.changed([session.logger.siteId], []))
      .catch((error: unknown) => {
        // the lease runs out by itself
        if (!isDatabaseAway(error)) log.error({ error }, 'a lease could not be released');
      });
  }

  // ---- the queue ----
  private async written(batch: Batch, written: Written): Promise<void> {
    let readings = 0;
    for (const item of batch.finished) readings += item.readings;
    this.readings += readings;
    meters().readings.add(readings);
    meters().frames.add(batch.frames.length);
    await this.judgement.written(batch, written);
  }

  private progressOf(loggerId: number): LoggerProgress | undefined {
    // of a logger on both ways its connection says more
    const session = this.serving.get(loggerId);
    // what a paused one could not say it did not keep to itself
    const spokeAt = session
      ? Math.max(session.spokeAt, session.resumedAt)
      : this.overHttps.presenceOf(loggerId)?.spokeAt;
    if (spokeAt === undefined) return undefined;
    const { newestS, waiting } = this.reports.of(loggerId);
    return { spokeAt, newestS, waiting: waiting || this.queue.paused };
  }

  private pressure(paused: boolean): void {
    for (const session of this.sessions) {
      if (paused) session.send({ type: 'wait', ms: 1000 });
      session.setPaused(paused);
    }
  }

  private tellAll(waitMs: number): void {
    for (const session of this.sessions) session.send({ type: 'wait', ms: waitMs });
  }

  // ---- notices and upkeep ----
  private notice(channel: string, payload: string): void {
    if (channel === CHANNELS.rollCall) this.later(() => this.tellListen([Number(payload)]));
    else if (channel === CHANNELS.asBuilt) {
      this.judgement.reload(Number(payload));
      this.later(() => this.renewRosters(Number(payload)));
    } else if (channel === CHANNELS.leased) {
      const leased = readLeased(payload);
      if (leased && leased.by !== this.process) this.letGo(leased.logger);
    } else if (channel === CHANNELS.tokens) {
      const loggerId = Number(payload);
      if ([...this.sessions].some((s) => s.logger.id === loggerId))
        this.later(() => this.endSessions(loggerId));
    } else if (channel === CHANNELS.written) {
      const written = readWritten(payload);
      if (written && written.by !== this.judgement.id) this.judgement.reload(written.site);
    }
  }

  /** Notices may have been missed: asks for everything that they could have told. */
  private catchUpWithNotices(): void {
    if (this.sessions.size === 0) return;
    const sites = [...new Set([...this.serving.values()].map((s) => s.logger.siteId))];
    this.later(async () => {
      await this.tellListen(sites);
      for (const site of sites) {
        this.judgement.reload(site);
        await this.renewRosters(site);
      }
      await this.renew();
    });
  }

  private later(work: () => Promise<void>): void {
    this.upkeep = this.upkeep.then(work).catch((error: unknown) => {
      if (!isDatabaseAway(error)) log.error({ error }, 'upkeep of ingest failed');
    });
  }

  private letGo(loggerId: number): void {
    const session = this.serving.get(loggerId);
    if (!session) return;
    this.serving.delete(loggerId);
    session.end('conflict', 'a newer connection of this logger took its place');
  }

  /** Closes connections whose token was ended meanwhile: those of one logger, or all. */
  private async endSessions(loggerId?: number): Promise<void> {
    const concerned = [...this.sessions].filter((s) => loggerId === undefined || s.logger.id === loggerId);
    const ended = await endedTokens(
      database('ingest'),
      concerned.map((s) => s.logger.tokenId),
    );
    for (const session of concerned)
      if (ended.has(session.logger.tokenId))
        session.end('unauthenticated', 'this token was ended; give the logger a new one');
  }

  private async tellListen(sites: readonly number[]): Promise<void> {
    const concerned = [...this.serving.values()].filter((s) => s.ready && sites.includes(s.logger.siteId));
    if (concerned.length === 0) return;
    const open = await openRollCalls(database('ingest'), sites);
    for (const session of concerned) session.send({ type: 'listen', on: open.has(session.logger.siteId) });
  }

  private async renewRosters(siteId: number): Promise<void> {
    for (const session of this.serving.values()) {
      if (!session.ready || session.logger.siteId !== siteId) continue;
      const roster = await currentRoster(database('ingest'), { id: session.logger.id, siteId });
      if (!roster.changed && session.hasRoster(roster.view.version)) continue;
      session.setRoster(roster.message, roster.view);
      this.notices.changed([siteId], []);
    }
  }

  private async renew(): Promise<void> {
    try {
      const db = database('ingest');
      const mine = [...this.serving.values()].filter((s) => s.ready);
      if (mine.length > 0) {
        const kept = new Set(
          await renewLeases(
            db,
            this.process,
            mine.map((s) => ({ loggerId: s.logger.id, spokeAt: new Date(s.spokeAt) })),
          ),
        );
        for (const session of mine) if (!kept.has(session.logger.id)) this.letGo(session.logger.id);
      }
      await this.endSessions();
      if (this.renewals++ % TOUCH_EVERY === 0)
        await touchTokens(
          db,
          mine.map((s) => ({ tokenId: s.logger.tokenId, at: new Date(s.spokeAt), address: s.address })),
        );
      const lost = await tellLostLoggers(db, LOST_AFTER_S);
      if (lost.length > 0) this.notices.changed(lost, []);
    } catch (error) {
      if (isDatabaseAway(error)) this.tellAll(5000);
      else log.error({ error }, 'leases could not be renewed');
    }
  }
}

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.ingest');
const shared = globalThis as unknown as Record<symbol, Ingest | undefined>;

/** The running ingest of this process; undefined where it has none. */
export const ingest = (): Ingest | undefined => shared[KEY];

export async function startIngest(): Promise<void> {
  if (shared[KEY]) return;
  const made = new Ingest();
  shared[KEY] = made;
  await made.start();
}

/** Ends the connections with 1001, writes what waits, gives the leases back. */
export async function stopIngest(): Promise<void> {
  const running = shared[KEY];
  shared[KEY] = undefined;
  await running?.stop();
}
