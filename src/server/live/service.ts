import { WebSocketServer, type WebSocket } from 'ws';
import type { Actor } from '../../domain/access/permissions';
import { CLOSE_SIGNED_OUT } from '../../schemas/live';
import { actorOfCookie } from '../auth/sessions';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { CHANNELS, readChanged } from '../queries/live-notices';
import { Connection, type Subscription } from './connection';
import { Listener } from './listener';
import { readRound } from './round';

/** After a wake-up so long is waited for more to come with it. */
const GATHER_MS = 20;
/** A line of the fleet is sent at most so often. */
const FLEET_EVERY_MS = 500;
/** Every listener hears something this often, if only that the connection stands; it also makes lost wake-ups good. */
const HEARTBEAT_MS = 15_000;
const SESSIONS_EVERY_MS = 60_000;

/** The browsers of one process. Notices only wake it: what it sends it has read from the database. */
export class LiveHub {
  readonly wss = new WebSocketServer({ noServer: true, maxPayload: 64 * 1024, perMessageDeflate: false });
  private readonly connections = new Set<Connection>();
  private readonly joining = new Set<{ sites: Set<number>; strings: Set<number> }>();
  private sites = new Set<number>();
  private strings = new Set<number>();
  private fleetSites = new Set<number>();
  private fleetAt = 0;
  private running: Promise<void> | undefined;
  private gather: NodeJS.Timeout | undefined;
  private fleetTimer: NodeJS.Timeout | undefined;
  private beat: NodeJS.Timeout | undefined;
  private sessionTimer: NodeJS.Timeout | undefined;
  private everything = false;
  private stopping = false;
  private readonly listener = new Listener(
    [CHANNELS.changed, CHANNELS.rollCall, CHANNELS.asBuilt],
    (channel, payload) => this.notice(channel, payload),
    () => {
      this.everything = true;
      this.wake();
    },
  );

  async start(): Promise<void> {
    await this.listener.start();
    this.beat = setInterval(() => {
      this.ping();
      this.everything = true;
      this.wake();
    }, HEARTBEAT_MS);
    this.sessionTimer = setInterval(() => void this.checkSessions(), SESSIONS_EVERY_MS);
  }

  async stop(): Promise<void> {
    this.stopping = true;
    clearInterval(this.beat);
    clearInterval(this.sessionTimer);
    clearTimeout(this.gather);
    clearTimeout(this.fleetTimer);
    for (const { ws } of this.connections) ws.close(1001, 'the server is going away');
    await this.listener.stop();
    await this.running;
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
    const missed = { sites: new Set<number>(), strings: new Set<number>() };
    this.joining.add(missed);
    return () => {
      this.joining.delete(missed);
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

  private notice(channel: string, payload: string): void {
    if (this.connections.size === 0) return;
    if (channel === CHANNELS.changed) {
      const changed = readChanged(payload);
      for (const id of changed?.sites ?? []) this.sites.add(id);
      for (const id of changed?.strings ?? []) this.strings.add(id);
    } else this.sites.add(Number(payload));
    this.wake();
  }

  private wake(): void {
    if (this.running || this.stopping) return;
    this.gather ??= setTimeout(() => {
      this.gather = undefined;
      this.running = this.round().finally(() => {
        this.running = undefined;
        if (this.sites.size + this.strings.size > 0) this.wake();
      });
    }, GATHER_MS);
  }

  private async round(): Promise<void> {
    const dirty = { sites: this.sites, strings: this.strings };
    const { everything } = this;
    this.sites = new Set();
    this.strings = new Set();
    this.everything = false;
    for (const id of dirty.sites) this.fleetSites.add(id);
    for (const missed of this.joining) {
      for (const id of dirty.sites) missed.sites.add(id);
      for (const id of dirty.strings) missed.strings.add(id);
    }
    const listening: Subscription[] = [];
    for (const connection of this.connections) listening.push(...connection.topics.values());
    if (listening.length === 0) return;
    const fleetDue = Date.now() - this.fleetAt >= FLEET_EVERY_MS;
    const fleetDirty = fleetDue ? this.fleetSites : new Set<number>();
    if (fleetDue) {
      this.fleetSites = new Set();
      this.fleetAt = Date.now();
    } else if (this.fleetSites.size > 0)
      this.fleetTimer ??= setTimeout(() => {
        this.fleetTimer = undefined;
        this.wake();
      }, FLEET_EVERY_MS);
    try {
      for (const { to, cursor, change } of await readRound(listening, dirty, fleetDirty)) {
        // unsubscribed, or subscribed anew, while we read
        if (to.connection.topics.get(to.topic) !== to) continue;
        to.cursor = cursor;
        if (everything || Object.keys(change).length > 0)
          to.connection.send({ type: 'delta', topic: to.topic, cursor, change });
      }
    } catch (error) {
      if (!isDatabaseAway(error)) log.error({ error }, 'a round of live changes failed');
      // nothing was sent: the next round tells it
      for (const id of dirty.sites) this.sites.add(id);
      for (const id of dirty.strings) this.strings.add(id);
      for (const id of fleetDirty) this.fleetSites.add(id);
      await new Promise((resolve) => setTimeout(resolve, 500));
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

  private async checkSessions(): Promise<void> {
    for (const connection of [...this.connections]) {
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
