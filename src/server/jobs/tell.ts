import { sendDue } from '../mail/send-outbox';
import { Listener } from '../live/listener';
import { Repeated } from '../live/repeated';
import { asIngest } from '../db/transaction';
import { CHANNELS } from '../queries/live-notices';
import { dropOldPictures } from '../queries/outbox';
import { forgetCallsBefore } from '../queries/webhooks-send';
import { writeGathered } from '../services/notice-digest';
import { tellRound, type Round } from '../services/notices-tell';
import { sendCalls } from '../services/webhook-send';
import type { Done } from './recorded';

/**
 * Telling people and other systems of events. The cron runs it each minute; a notice of the database wakes it within a
 * second or two, so that a hazard is a letter at once. Safe with several workers, and killed anywhere.
 */
const ROUNDS_A_RUN = 200;
const PICTURES_KEPT_DAYS = 60;
const CALLS_KEPT_DAYS = 60;
const DAY_MS = 86_400_000;

/** Reads events until none is left. */
export async function tell(now: () => Date): Promise<Done & { held: number }> {
  const sum = { events: 0, notices: 0, letters: 0, calls: 0, held: 0 };
  for (let i = 0; i < ROUNDS_A_RUN; i++) {
    const round: Round = await tellRound(now());
    sum.events += round.events;
    sum.notices += round.notices;
    sum.letters += round.letters;
    sum.calls += round.calls;
    sum.held = round.held ? 1 : 0;
    if (!round.more) break;
  }
  return sum;
}

/** The letters that gather several, and what is too old to keep. */
export async function tellGathered(now: Date): Promise<Done> {
  const letters = await writeGathered(now);
  const forgotten = await asIngest(async (tx) => {
    await dropOldPictures(tx, new Date(now.getTime() - PICTURES_KEPT_DAYS * DAY_MS));
    return forgetCallsBefore(tx, new Date(now.getTime() - CALLS_KEPT_DAYS * DAY_MS));
  });
  return { letters, forgotten };
}

const GATHER_MS = 300;
const EVERY_MS = 1500;

/** Wakes telling, sending and calling as something happens; a wake-up that is lost is made good by the cron. */
export class TellWatch {
  private readonly calling = new Repeated(GATHER_MS, EVERY_MS, async () => {
    await sendCalls(() => new Date());
  });
  private readonly sending = new Repeated(GATHER_MS, EVERY_MS, async () => {
    await sendDue(() => new Date());
  });
  private readonly telling = new Repeated(GATHER_MS, EVERY_MS, async () => {
    const done = await tell(() => new Date());
    if ((done.letters ?? 0) > 0) this.sending.soon();
    if ((done.calls ?? 0) > 0) this.calling.soon();
    if (done.held > 0) this.telling.soon();
  });
  private readonly listener = new Listener(
    [CHANNELS.changed, CHANNELS.called],
    (channel) => {
      if (channel === CHANNELS.called) this.calling.soon();
      else this.telling.soon();
    },
    () => this.telling.soon(),
  );

  start(): Promise<void> {
    return this.listener.start();
  }

  async stop(): Promise<void> {
    await this.listener.stop();
    await this.telling.stop();
    await Promise.all([this.sending.stop(), this.calling.stop()]);
  }
}
