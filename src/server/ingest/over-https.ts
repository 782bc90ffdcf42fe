import { setImmediate as turn, setTimeout as sleep } from 'node:timers/promises';
import type { IngestReply, LoggerMessage, RefusedItem, Roster } from '../../schemas/ingest';
import { database } from '../db/pools';
import { AppError } from '../errors';
import { openRollCalls, spokeByHttps, type KnownLogger } from '../queries/ingest-loggers';
import type { RosterView } from '../queries/ingest-rows';
import { touchTokens } from '../queries/ingest-tokens';
import { currentRoster, rosterVersion } from '../queries/roster';
import type { Item } from './batch';
import { messagesOf, readBatchBody } from './batch-body';
import { readHello } from './hello';
import { readEnvelope, readMessage, type Reading, type Refused } from './read-message';

/** What batches need of the service around them. */
export interface OverHttpsHost {
  enqueue: (item: Item) => void;
  refused: (loggerId: number, field: string, reason: string) => void;
  /** The queue is full. */
  full: () => boolean;
  /** Sites where something is new. */
  changed: (siteId: number) => void;
}

/** Batches that are taken at a time, over all loggers. */
const AT_ONCE = 16;
/** How long a batch waits for room in the queue, and then for its COMMIT. */
const ROOM_WITHIN_MS = 10_000;
const COMMIT_WITHIN_MS = 25_000;
const LOOK_EVERY_MS = 100;
/** A logger counts as connected so many report intervals after its last batch, and at least so long. */
const HELD_INTERVALS = 3;
const HELD_MIN_S = 90;

interface Presence {
  /** Wall-clock ms of its last batch. */
  spokeAt: number;
  heldUntil: number;
}
type Counted = Exclude<LoggerMessage, { type: 'hello' }>;
interface Taken {
  logger: KnownLogger;
  current: RosterView;
  views: Map<number, RosterView>;
  presence: Presence;
  /** Seconds for which it counts as connected from now on. */
  holdS: number;
  refused: RefusedItem[];
  commits: Promise<void>[];
  accepted: number;
  readings: number;
}

const remedyFor = ({ field, again }: Refused): string => {
  if (field === 'roster') return 'Fetch the roster again, and report by the version that it names.';
  if (field === 'protocol' || field === 'logger') return 'Set the logger up anew.';
  return again
    ? 'Send it again a little later.'
    : 'Mend it before it is sent again: as it is, it is refused each time.';
};

const unsure = (): AppError =>
  new AppError('unavailable', {
    message:
      'The database has not answered in time, so it is not certain that all of this batch is kept. Send all of it again: what comes twice is kept once.',
    retryAfterS: 5,
  });

/** Batches of messages by HTTPS: the same checks, the same queue and the same COMMIT as on the WebSocket. */
export class OverHttps {
  private readonly presences = new Map<number, Presence>();
  private readonly busy = new Set<number>();
  private readonly ending = new AbortController();

  constructor(private readonly host: OverHttpsHost) {}

  /** A logger whose last batch is not long ago, for the judgement of this process. */
  presenceOf(loggerId: number): Presence | undefined {
    const presence = this.presences.get(loggerId);
    if (!presence || presence.heldUntil >= Date.now()) return presence;
    this.presences.delete(loggerId);
    return undefined;
  }

  /** No more batches; those that wait are told that they may not be kept. */
  stop(): void {
    this.ending.abort();
  }

  /**
   * Takes a batch and answers once everything in it is durable or refused.
   * @throws AppError too_many (another batch of this logger is being taken) · unavailable (full, or no COMMIT in time)
   *   · too_large · invalid (unreadable as a whole, or nothing in it could be accepted)
   */
  async take(logger: KnownLogger, address: string, request: Request): Promise<IngestReply> {
    this.checkRoom(logger.id);
    this.busy.add(logger.id);
    try {
      const body = await readBatchBody(request);
      return await this.taken(logger, address, body, request.headers.get('content-type'));
    } finally {
      this.busy.delete(logger.id);
    }
  }

  /** The roster of a logger as it is now. */
  async roster(logger: KnownLogger, address: string): Promise<{ roster: Roster; listen: boolean }> {
    const { message, listen } = await this.arrived(logger, address);
    return { roster: message, listen };
  }

  private checkRoom(loggerId: number): void {
    if (this.ending.signal.aborted || this.busy.size >= AT_ONCE || this.host.full())
      throw new AppError('unavailable', {
        message: 'There is no room for more readings at this moment. Keep them, and send them again.',
        retryAfterS: 2,
      });
    if (this.busy.has(loggerId))
      throw new AppError('too_many', {
        message: 'A batch of this logger is being taken. Send the next one when it has been answered.',
        retryAfterS: 1,
      });
  }

  private async arrived(logger: KnownLogger, address: string) {
    const db = database('ingest');
    const roster = await currentRoster(db, { id: logger.id, siteId: logger.siteId });
    if (roster.changed) this.host.changed(logger.siteId);
    const holdS = Math.max(HELD_MIN_S, HELD_INTERVALS * roster.message.reportIntervalS);
    await spokeByHttps(db, { loggerId: logger.id, address, firmware: null, holdS });
    const now = new Date();
    await touchTokens(db, [{ tokenId: logger.tokenId, at: now, address }]);
    const presence: Presence = {
      spokeAt: now.getTime(),
      heldUntil: now.getTime() + holdS * 1000,
    };
    this.presences.set(logger.id, presence);
    const listen = (await openRollCalls(db, [logger.siteId])).has(logger.siteId);
    return { message: roster.message, view: roster.view, listen, presence, holdS };
  }

  private async taken(
    logger: KnownLogger,
    address: string,
    body: Buffer,
    contentType: string | null,
  ): Promise<IngestReply> {
    const messages = messagesOf(body, contentType);
    const { view, listen, presence, holdS } = await this.arrived(logger, address);
    const batch: Taken = {
      logger,
      current: view,
      views: new Map([[view.version, view]]),
      presence,
      holdS,
      refused: [],
      commits: [],
      accepted: 0,
      readings: 0,
    };
    let index = 0;
    for (const message of messages) {
      await this.one(batch, address, index++, message);
      await turn(); // sockets and pages have their turn between messages
    }
    if (index === 0)
      throw new AppError('invalid', {
        message: 'There is no message in the body. Send at least one.',
        fields: [{ field: 'body', message: 'is empty' }],
      });
    await this.committed(batch.commits);
    batch.refused.sort((a, b) => a.index - b.index);
    if (batch.accepted === 0) throw refusedAltogether(batch.refused);
    const { accepted, readings, refused } = batch;
    return { messages: index, accepted, readings, refused, roster: view.version, listen };
  }

  private async one(
    batch: Taken,
    address: string,
    index: number,
    message: Reading<Record<string, unknown>>,
  ): Promise<void> {
    if (!message.ok) return this.refuse(batch, index, message.refused);
    if (message.value.type === 'hello') {
      const read = readHello(message.value, batch.logger.serial, Math.floor(Date.now() / 1000));
      if (!read.ok) return this.refuse(batch, index, { seq: null, ...read });
      const { logger, holdS } = batch;
      const spoke = { loggerId: logger.id, address, firmware: read.firmware, holdS };
      await spokeByHttps(database('ingest'), spoke);
      batch.accepted++;
      return;
    }
    const envelope = readEnvelope(message.value);
    if (!envelope.ok) return this.refuse(batch, index, envelope.refused);
    if (envelope.value.type === 'hello') return;
    const view = await this.viewOf(batch, envelope.value);
    if (!view)
      return this.refuse(batch, index, {
        seq: envelope.value.seq,
        field: 'roster',
        reason: `this version was never given to this logger; the current one is ${batch.current.version}`,
        again: false,
      });
    const read = readMessage(envelope.value, view, batch.logger, Math.floor(Date.now() / 1000));
    if (!read.ok) return this.refuse(batch, index, read.refused);
    const { seq } = envelope.value;
    if (!(await this.room()))
      return this.refuse(batch, index, {
        seq,
        field: 'message',
        reason: 'there was no room for it within 10 s',
        again: true,
      });
    this.enqueue(batch, index, seq, read.value);
  }

  private enqueue(
    batch: Taken,
    index: number,
    seq: number,
    { work, readings, gateways }: Pick<Item, 'work' | 'readings' | 'gateways'>,
  ): void {
    const { id: loggerId, siteId } = batch.logger;
    batch.commits.push(
      new Promise((resolve) => {
        this.host.enqueue({
          work,
          readings,
          gateways,
          siteId,
          loggerId,
          taken: 0,
          fault: null,
          written: () => {
            batch.accepted++;
            batch.readings += readings;
            resolve();
          },
          refused: (reason) => {
            this.refuse(batch, index, { seq, field: 'message', reason, again: false });
            resolve();
          },
        });
      }),
    );
  }

  private refuse(batch: Taken, index: number, refused: Refused): void {
    const { seq, field, reason, again } = refused;
    this.host.refused(batch.logger.id, field, reason);
    batch.refused.push({ index, seq, field, reason, remedy: remedyFor(refused), again });
  }

  private async viewOf(batch: Taken, message: Counted): Promise<RosterView | undefined> {
    const version = message.type === 'frames' ? message.roster : batch.current.version;
    const known = batch.views.get(version);
    if (known || version > batch.current.version) return known;
    const earlier = await rosterVersion(database('ingest'), batch.logger, version);
    if (earlier) batch.views.set(version, earlier);
    return earlier;
  }

  /** Waits until the queue takes more; false: it did not, or this process ends. */
  private async room(): Promise<boolean> {
    const end = Date.now() + ROOM_WITHIN_MS;
    while (this.host.full()) {
      if (Date.now() > end || this.ending.signal.aborted) return false;
      await sleep(LOOK_EVERY_MS);
    }
    return !this.ending.signal.aborted;
  }

  private async committed(commits: readonly Promise<void>[]): Promise<void> {
    if (commits.length === 0) return;
    const { signal } = this.ending;
    if (signal.aborted) throw unsure();
    const settled = new AbortController();
    const over = new Promise<'over'>((resolve) => {
      const timer = setTimeout(() => resolve('over'), COMMIT_WITHIN_MS);
      const end = () => resolve('over');
      signal.addEventListener('abort', end, { once: true });
      settled.signal.addEventListener('abort', () => {
        clearTimeout(timer);
        signal.removeEventListener('abort', end);
      });
    });
    try {
      if ((await Promise.race([Promise.all(commits), over])) === 'over') throw unsure();
    } finally {
      settled.abort();
    }
  }
}

const FIELDS_TOLD = 100;

/** Nothing of a batch was accepted: a success would be missed by whoever looks at the status alone. */
function refusedAltogether(refused: readonly RefusedItem[]): AppError {
  if (refused.every((r) => r.again && r.field === 'message'))
    return new AppError('unavailable', {
      message: 'There was no room for these readings. Keep them, and send them again.',
      retryAfterS: 5,
    });
  return new AppError('invalid', {
    message: `None of the ${refused.length} messages could be accepted.`,
    fields: refused.slice(0, FIELDS_TOLD).map((r) => ({
      field: `messages[${r.index}].${r.field}`,
      message: `${r.reason}. ${r.remedy}`,
    })),
  });
}
