import { database } from '../db/pools';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { CHANNELS, changedPayloads, sendNotices } from '../queries/live-notices';

/** Gathers what changed for a moment and tells it in one go: a fleet reports in bursts. */
const GATHER_MS = 10;

export class Notices {
  private sites = new Set<number>();
  private strings = new Set<number>();
  private timer: NodeJS.Timeout | undefined;
  private sending: Promise<void> = Promise.resolve();

  changed(sites: Iterable<number>, strings: Iterable<number>): void {
    for (const id of sites) this.sites.add(id);
    for (const id of strings) this.strings.add(id);
    if (this.sites.size + this.strings.size === 0) return;
    this.timer ??= setTimeout(() => {
      this.timer = undefined;
      this.sending = this.sending.then(() => this.flush());
    }, GATHER_MS);
  }

  async stop(): Promise<void> {
    clearTimeout(this.timer);
    await this.sending;
    await this.flush();
  }

  private async flush(): Promise<void> {
    const payloads = changedPayloads({ sites: this.sites, strings: this.strings });
    this.sites.clear();
    this.strings.clear();
    try {
      await sendNotices(
        database('ingest'),
        payloads.map((payload) => ({ channel: CHANNELS.changed, payload })),
      );
    } catch (error) {
      // a lost wake-up is made good by the next one: readers go by their cursors
      if (!isDatabaseAway(error)) log.error({ error }, 'a notice could not be sent');
    }
  }
}
