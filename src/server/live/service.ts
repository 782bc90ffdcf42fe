import { WebSocketServer, type WebSocket } from 'ws';
import type { Actor } from '../../domain/access/permissions';
import { CLOSE_SIGNED_OUT } from '../../schemas/live';
import { actorOfCookie } from '../auth/sessions';
import { isDatabaseAway } from '../errors';
import { asIngest } from '../db/transaction';
import { log } from '../log';
import { readable, siteByString } from '../queries/live';
import { CHANNELS, readChanged, readNoticed } from '../queries/live-notices';
import { keptSites } from '../services/kept-sites';
import { Connection, type Subscription } from './connection';
import { Listener } from './listener';
import { Repeated } from './repeated';
import { readNews, readNotices, readOverviews, watchedStrings, type Delta } from './round';
import { isOfSite } from './topics';

/** After a wake-up so long is waited for more to come with it. */
const GATHER_MS = 10;
/** Site lines, inverters and causes are sent at most so often. */
const OVERVIEW_EVERY_MS = 500;
/** Events behind a running transaction are asked for again after this. */
const HELD_AGAIN_MS = 250;
/** Everything is read anew this often, which makes lost wake-ups good. */
const HEARTBEAT_MS = 15_000;
/** Browsers hear something this often, if only that the database was read: what is silent for two of it is not live. */
const PULSE_MS = 5000;
/** While a round takes longer, nothing is said to be well. */
const ROUND_MAX_MS = 5000;
const SESSIONS_EVERY_MS = 60_000;
/** What changed at sites that somebody looks at is read so often, before they look again. */
const READ_AHEAD_EVERY_MS = 2000;

/** The browsers of one process. Notices only wake it: what it sends it has read from the database. */
export class LiveHub {
  readonly wss = new WebSocketServer({ noServer: true, maxPayload: 64 * 1024, perMessageDeflate: false });
  private readonly connections = new Set<Connection>();
  private readonly joining = new Set<{ sites: Set<number>; strings: Set<number>; persons: Set<number> }>();
  private sites = new Set<number>();
  private strings = new Set<number>();
  private eventSites = new Set<number>();
  private readonly heldSites = new Set<number>();
  private heldTimer: NodeJS.Timeout | undefined;
  private persons = new Set<number>();
  private everybody = false;
  private readonly notices = new Repeated(GATHER_MS, GATHER_MS, () => this.sendNotices());
  private readonly siteByString = new Map<number, number>();
  private readonly news = new Repeated(GATHER_MS, GATHER_MS, () => this.sendNews());
  private readonly overviews = new Repeated(GATHER_MS, OVERVIEW_EVERY_MS, () => this.sendOverviews());
  private readonly pulse = new Repeated(0, PULSE_MS, () => this.sendPulse());
  private pulseTimer: NodeJS.Timeout | undefined;
  private beat: NodeJS.Timeout | undefined;
  private sessionTimer: NodeJS.Timeout | undefined;
  private aheadTimer: NodeJS.Timeout | undefined;
  private readonly ahead = new Repeated(0, READ_AHEAD_EVERY_MS, () => keptSites().readAhead(new Date()));
  private everything = false;
  private stopping = false;
  private readonly listener = new Listener(
    [CHANNELS.changed, CHANNELS.rollCall, CHANNELS.asBuilt, CHANNELS.noticed, CHANNELS.access],
    (channel, payload) => this.notice(channel, payload),
    () => {
      keptSites().missed();
      this.everything = true;
      this.everybody = true;
      this.notices.soon();
      this.wake();
    },
  );

  async start(): Promise<void> {
    keptSites().heardBy(() => this.hears);
    await this.listener.start();
    this.beat = setInterval(() => {
      this.ping();
      this.everything = true;
      this.everybody = true;
      this.notices.soon();
      this.wake();
    }, HEARTBEAT_MS);
    this.pulseTimer = setInterval(() => this.pulse.soon(), PULSE_MS);
    this.sessionTimer = setInterval(() => void this.checkSessions(), SESSIONS_EVERY_MS);
    this.aheadTimer = setInterval(() => this.ahead.soon(), READ_AHEAD_EVERY_MS);
  }

  async stop(): Promise<void> {
    this.stopping = true;
    clearInterval(this.beat);
    clearInterval(this.pulseTimer);
    clearInterval(this.sessionTimer);
    clearInterval(this.aheadTimer);
    clearTimeout(this.heldTimer);
    for (const { ws } of this.connections) ws.close(1001, 'the server is going away');
    await this.listener.stop();
    keptSites().heardBy(() => false);
    await Promise.all([
      this.news.stop(),
      this.overviews.stop(),
      this.notices.stop(),
      this.ahead.stop(),
      this.pulse.stop(),
    ]);
    for (const { ws } of this.connections) ws.terminate();
  }

  accept(ws: WebSocket, actor: Actor, cookie: string): void {
    const connection = new Connection(
      ws,
      actor,
      cookie,
      (c) => this.connections.delete(c),
      () => this.join(),
    );
    this.connections.add(connection);
  }

  private join(): () => void {
    const missed = { sites: new Set<number>(), strings: new Set<number>(), persons: new Set<number>() };
    this.joining.add(missed);
    return () => {
      this.joining.delete(missed);
      for (const id of missed.persons) this.persons.add(id);
      if (missed.persons.size > 0) this.notices.soon();
      if (missed.sites.size + missed.strings.size === 0) return;
      for (const id of missed.sites) this.sites.add(id);
      for (const id of missed.strings) this.strings.add(id);
      this.wake();
    };
  }

  /** Open connections, for the status page. */
  get size(): number {
    return this.connections.size;
  }

  /** Whether changes are heard of. */
  get hears(): boolean {
    return this.listener.listening;
  }

  private notice(channel: string, payload: string): void {
    const changed =
      channel === CHANNELS.changed
        ? readChanged(payload)
        : channel === CHANNELS.rollCall || channel === CHANNELS.asBuilt
          ? { sites: [Number(payload)], strings: [] }
          : undefined;
    if (changed) keptSites().changed(changed.sites);
    if (this.connections.size === 0) return;
    if (channel === CHANNELS.access) {
      const person = Number(payload);
      void this.checkSessions((c) => c.actor.personId === person);
      return;
    }
    if (channel === CHANNELS.noticed) {
      for (const id of readNoticed(payload)) this.persons.add(id);
      this.notices.soon();
      return;
    }
    for (const id of changed?.sites ?? []) {
      this.sites.add(id);
      this.eventSites.add(id);
    }
    for (const id of changed?.strings ?? []) this.strings.add(id);
    this.wake();
  }

  private wake(): void {
    if (this.stopping) return;
    this.news.soon();
    if (this.sites.size > 0) this.overviews.soon();
  }

  private listening(): Subscription[] {
    const all: Subscription[] = [];
    for (const connection of this.connections) all.push(...connection.topics.values());
    return all;
  }

  private async sendNews(): Promise<void> {
    const { strings, everything, eventSites } = this;
    this.strings = new Set();
    this.eventSites = new Set();
    this.everything = false;
    for (const missed of this.joining) for (const id of strings) missed.strings.add(id);
    const listening = this.listening();
    if (listening.length === 0) return;
    try {
      const watched = watchedStrings(listening, await this.sitesOf(strings));
      const events = listening.some((l) => isOfSite(l.subject) && eventSites.has(l.subject.siteId));
      if (!everything && !events && watched.size === 0) return;
      const { deltas, held } = await readNews(listening, watched);
      this.send(deltas, everything);
      if (held && events) this.askAgain(eventSites);
    } catch (error) {
      // nothing was sent: the next round tells it
      for (const id of strings) this.strings.add(id);
      for (const id of eventSites) this.eventSites.add(id);
      this.everything ||= everything;
      throw error;
    }
  }

  /** Events that wait for a running transaction are asked for again soon. */
  private askAgain(sites: ReadonlySet<number>): void {
    clearTimeout(this.heldTimer);
    for (const id of sites) this.heldSites.add(id);
    this.heldTimer = setTimeout(() => {
      for (const id of this.heldSites) this.eventSites.add(id);
      this.heldSites.clear();
      this.wake();
    }, HELD_AGAIN_MS);
  }

  /** The sites of strings; a string never moves to another site, so what was learned stays. */
  private async sitesOf(strings: ReadonlySet<number>): Promise<Map<number, number>> {
    const unknown = [...strings].filter((id) => !this.siteByString.has(id));
    if (unknown.length > 0)
      for (const [id, site] of await asIngest((tx) => siteByString(tx, unknown)))
        this.siteByString.set(id, site);
    return new Map(
      [...strings].flatMap((id) => {
        const site = this.siteByString.get(id);
        return site === undefined ? [] : [[id, site] as const];
      }),
    );
  }

  private async sendOverviews(): Promise<void> {
    const { sites } = this;
    this.sites = new Set();
    for (const missed of this.joining) for (const id of sites) missed.sites.add(id);
    const listening = this.listening();
    if (listening.length === 0) return;
    try {
      this.send(await readOverviews(listening, sites), false);
    } catch (error) {
      for (const id of sites) this.sites.add(id);
      throw error;
    }
  }

  private async sendNotices(): Promise<void> {
    const { persons, everybody } = this;
    this.persons = new Set();
    this.everybody = false;
    for (const missed of this.joining) for (const id of persons) missed.persons.add(id);
    try {
      this.send(await readNotices(this.listening(), everybody ? 'everybody' : persons), false);
    } catch (error) {
      for (const id of persons) this.persons.add(id);
      this.everybody ||= everybody;
      throw error;
    }
  }

  private send(deltas: readonly Delta<Subscription>[], everything: boolean): void {
    for (const { to, cursor, change } of deltas) {
      // unsubscribed, or subscribed anew, while we read
      if (to.connection.topics.get(to.topic) !== to) continue;
      if (BigInt(cursor) > BigInt(to.cursor)) to.cursor = cursor;
      if (everything || Object.keys(change).length > 0)
        to.connection.send({ type: 'delta', topic: to.topic, cursor: to.cursor, change });
    }
  }

  /** Says that the database answers, by a delta without content; nothing where it does not, or a round hangs. */
  private async sendPulse(): Promise<void> {
    if (this.connections.size === 0) return;
    await asIngest(readable);
    if ([this.news, this.overviews, this.notices].some((round) => round.runningMs > ROUND_MAX_MS)) return;
    for (const connection of this.connections) {
      const [one] = connection.topics.values();
      if (one) connection.send({ type: 'delta', topic: one.topic, cursor: one.cursor, change: {} });
    }
  }

  private ping(): void {
    for (const connection of this.connections) {
      if (!connection.alive) {
        connection.ws.terminate();
        continue;
      }
      connection.alive = false;
      connection.ws.ping();
    }
  }

  /** Asks again who everybody is; ends the connections of those who are nobody any more. */
  async checkSessions(whose: (connection: Connection) => boolean = () => true): Promise<void> {
    for (const connection of [...this.connections].filter(whose)) {
      try {
        const found = await actorOfCookie(connection.cookie);
        if (!found) {
          connection.ws.close(CLOSE_SIGNED_OUT, 'the session has ended: sign in again');
          continue;
        }
        const { role, organisationId, sites } = connection.actor;
        const now = found.actor;
        const same =
          now.role === role && now.organisationId === organisationId && String(now.sites) === String(sites);
        connection.actor = now;
        // what the person may see has changed: the browser comes back and asks anew
        if (!same) connection.ws.close(1012, 'access has changed');
      } catch (error) {
        if (!isDatabaseAway(error)) log.error({ error }, 'a session could not be checked');
      }
    }
  }
}

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.live');
const shared = globalThis as unknown as Record<symbol, LiveHub | undefined>;

/** The running hub of this process; undefined where it has none. */
export const liveHub = (): LiveHub | undefined => shared[KEY];

export async function startLive(): Promise<void> {
  if (shared[KEY]) return;
  const hub = new LiveHub();
  shared[KEY] = hub;
  await hub.start();
}

/** Ends the connections with 1001. */
export async function stopLive(): Promise<void> {
  const hub = shared[KEY];
  shared[KEY] = undefined;
  await hub?.stop();
}
