import type { WebSocket } from 'ws';
import { groupedBy } from '../../domain/grouped-by';
import type { Actor } from '../../domain/access/permissions';
import {
  CLOSE_COME_BACK,
  clientMessage,
  type Change,
  type ClientMessage,
  type LiveMessage,
} from '../../schemas/live';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { meters } from '../observe/meters';
import type { Listening } from './round';
import { snapshotOf, subjectOf, type Subject } from './topics';
import { liveRefusals } from '../../words/refusals';

/** Bytes that may wait for a reader before it is sent away to come back with its cursors. */
export const WAITING_MAX_BYTES = 4 * 1024 * 1024;
const TOPICS_MAX = 20;

export class Subscription implements Listening {
  causes: string;
  readonly causesAt = new Map<string, string>();
  constructor(
    readonly connection: Connection,
    readonly topic: string,
    readonly subject: Subject,
    public cursor: string,
    /** What it begins with. */
    { causes = [] }: Change,
  ) {
    this.causes = JSON.stringify(causes);
    if (subject.kind === 'fleet')
      for (const [site, list] of groupedBy(causes, (cause) => cause.siteId))
        this.causesAt.set(site, JSON.stringify(list));
  }
}

/** One browser's socket and what it listens to. */
export class Connection {
  readonly topics = new Map<string, Subscription>();
  alive = true;
  /** Subscriptions are answered one after the other, in the order in which they were asked for. */
  private turn: Promise<void> = Promise.resolve();

  constructor(
    readonly ws: WebSocket,
    public actor: Actor,
    readonly cookie: string,
    closed: (connection: Connection) => void,
    /** What changes from now until the returned function is called is told again after it. */
    private readonly joining: () => () => void,
  ) {
    ws.on('pong', () => {
      this.alive = true;
    });
    ws.on('error', (error) => log.debug({ error: error.message }, 'a live connection failed'));
    ws.on('close', () => {
      this.topics.clear();
      closed(this);
    });
    ws.on('message', (data, isBinary) => {
      // one message that can't be read must not end what all the others are served by
      try {
        this.take(data as Buffer, isBinary);
      } catch (error) {
        log.error({ error }, 'a message of a browser could not be read');
        ws.close(1008, liveRefusals.noMessage);
      }
    });
  }

  send(message: LiveMessage): void {
    const { ws } = this;
    if (ws.readyState !== ws.OPEN) return;
    if (ws.bufferedAmount > WAITING_MAX_BYTES) {
      meters().liveSlow.add();
      ws.close(CLOSE_COME_BACK, liveRefusals.tooSlow);
      return;
    }
    meters().liveSent.add();
    ws.send(JSON.stringify(message));
  }

  private take(data: Buffer, isBinary: boolean): void {
    let value: unknown;
    try {
      value = isBinary ? undefined : JSON.parse(data.toString('utf8'));
    } catch {
      value = undefined; // refused below, like everything else that is no message
    }
    const parsed = clientMessage.safeParse(value);
    if (!parsed.success) {
      const topic =
        typeof value === 'object' && value !== null && 'topic' in value && typeof value.topic === 'string'
          ? value.topic
          : '';
      this.send({ type: 'refused', topic: topic.slice(0, 80), reason: liveRefusals.noMessage });
      return;
    }
    const message = parsed.data;
    if (message.type === 'unsubscribe') {
      this.turn = this.turn.then(() => void this.topics.delete(message.topic));
      return;
    }
    this.turn = this.turn.then(() => this.subscribe(message));
  }

  private async subscribe(message: Extract<ClientMessage, { type: 'subscribe' }>): Promise<void> {
    const { topic } = message;
    if (this.ws.readyState !== this.ws.OPEN) return;
    if (!this.topics.has(topic) && this.topics.size >= TOPICS_MAX) {
      this.send({
        type: 'refused',
        topic,
        reason: liveRefusals.tooManyTopics(TOPICS_MAX),
      });
      return;
    }
    // a change that falls between the reading and the listening must not be lost
    const joined = this.joining();
    try {
      const subject = await subjectOf(topic, this.actor);
      if ('refused' in subject) {
        this.send({ type: 'refused', topic, reason: subject.refused });
        return;
      }
      const earlier =
        message.cursor !== undefined && /^\d{1,19}$/.test(message.cursor) ? message.cursor : undefined;
      const { kind, cursor, change } = await snapshotOf(subject, earlier);
      if (this.ws.readyState !== this.ws.OPEN) return;
      this.topics.set(topic, new Subscription(this, topic, subject, cursor, change));
      this.send({ type: kind, topic, cursor, change });
    } catch (error) {
      if (!isDatabaseAway(error)) log.error({ error, topic }, 'a subscription failed');
      this.ws.close(1013, liveRefusals.awayJustNow);
    } finally {
      joined();
    }
  }
}
