import pg from 'pg';
import { config } from '../config';
import { isDatabaseAway } from '../errors';
import { log } from '../log';
import { meters } from '../observe/meters';
import { deadWorkers, freeJobsOf, holdLife, oldestDueS } from '../queries/job-queue';

const LOOK_EVERY_MS = 20_000;

/**
 * Shows that this worker lives, and gives back what workers that died held: the library itself would keep a killed
 * worker's jobs and queues for four hours. A job given back too early would run twice, which changes nothing.
 */
export class WorkerLife {
  private client: pg.Client | undefined;
  private timer: NodeJS.Timeout | undefined;
  private turn: Promise<void> = Promise.resolve();

  constructor(private readonly worker: string) {}

  async start(): Promise<void> {
    await this.look();
    this.timer = setInterval(() => {
      this.turn = this.turn.then(() => this.look());
    }, LOOK_EVERY_MS);
  }

  async stop(): Promise<void> {
    clearInterval(this.timer);
    await this.turn;
    const { client } = this;
    this.client = undefined;
    await client?.end();
  }

  private async look(): Promise<void> {
    try {
      const client = (this.client ??= await this.connect());
      meters().oldestDue.set(await oldestDueS(client));
      const dead = await deadWorkers(client, this.worker);
      if (dead.length === 0) return;
      await freeJobsOf(client, dead);
      log.warn({ workers: dead.length }, 'a worker died in the middle of its jobs; they are tried again');
    } catch (error) {
      if (!isDatabaseAway(error)) log.error({ error }, 'jobs of dead workers could not be looked for');
    }
  }

  private async connect(): Promise<pg.Client> {
    const client = new pg.Client({ connectionString: config().DATABASE_URL });
    const lost = (): void => {
      if (this.client === client) this.client = undefined;
    };
    client.on('error', lost);
    client.on('end', lost);
    await client.connect();
    await holdLife(client, this.worker);
    return client;
  }
}
