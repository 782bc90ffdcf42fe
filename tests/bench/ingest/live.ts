import type pg from 'pg';
import { WebSocket } from 'ws';
import type { LiveMessage } from '../../../src/schemas/live';
import { openSession } from '../../../src/server/auth/sessions';
import { closePools } from '../../../src/server/db/pools';
import { connectLogger } from './loggers';
import type { BenchPlant } from './plant';
import { readingOf } from './readings';

interface LiveBench {
  db: pg.Client;
  plant: BenchPlant;
  port: number;
  say: (text: string) => void;
  figure: (name: string, value: number, unit: string, digits?: number) => void;
}

const READINGS_PER_S = 2000;
const SECONDS = 30;
/** Changes to wait for: one in so many frames turns a unit of a watched string. */
const TURN_EVERY_MS = 150;
/** What a page needs to draw a change once it has it, ms: two frames of a screen at 60 Hz. */
const RENDER_MS = 33;

const percentile = (sorted: readonly number[], p: number): number =>
  sorted[Math.min(sorted.length - 1, Math.ceil(p * sorted.length) - 1)] ?? NaN;

/**
 * A steady 2,000 readings a second over the whole fleet, and one browser's connection that listens to a site, a
 * string and the fleet. Every now and then a unit of the watched string says that it is in shutdown, or passing
 * again; the time counts from the moment its frame is sent to the delta that shows it, plus the time to draw it.
 */
export async function measureLive({ db, plant, port, say, figure }: LiveBench): Promise<void> {
  const { rows } = await db.query<{ id: number }>(
    `insert into person (organisation_id, email, name, role, password_hash)
     values (1, 'bench@wakeline.example', 'Bench', 'analyst', '!') returning id`,
  );
  const cookie = (await openSession(rows[0]!.id, false)).split(';')[0]!;
  await closePools();
  const [site] = plant.sites;
  const watched = site!.strings[3]!;
  const live = new WebSocket(`ws://127.0.0.1:${port}/live`, { headers: { cookie } });
  const shown: ((state: string) => void)[] = [];
  const joined = new Set<string>();
  live.on('message', (data) => {
    const message = JSON.parse(String(data)) as LiveMessage;
    if (message.type === 'refused') throw new Error(message.reason);
    if (message.type === 'snapshot') joined.add(message.topic);
    const string = message.change.strings?.find((s) => s.id === watched.ref);
    const state = string?.slots[0]?.state;
    if (message.topic.startsWith('string:') && state) for (const f of shown) f(state);
  });
  await new Promise((resolve, reject) => live.once('open', resolve).once('error', reject));
  for (const topic of ['fleet', `site:${site!.ref}`, `string:${watched.ref}`])
    live.send(JSON.stringify({ type: 'subscribe', topic }));
  while (joined.size < 3) await new Promise((resolve) => setTimeout(resolve, 20));

  const loggers = await Promise.all(plant.sites.map((s) => connectLogger(`ws://127.0.0.1:${port}`, s)));
  const perFrame = plant.unitsPerString;
  const turns: number[] = [];
  let held = false;
  let minute = 10_000;
  const frame = (siteIndex: number, string: number, holdFirst: boolean): string => {
    const first = (siteIndex * plant.stringsPerSite + string) * perFrame;
    const r = Array.from({ length: perFrame }, (_, u) => readingOf(first + u, minute));
    for (const x of r) Object.assign(x, { state: 1, voltage: 3200 });
    if (holdFirst) Object.assign(r[0]!, { state: 2, voltage: 60 });
    return JSON.stringify({
      type: 'frames',
      seq: minute++,
      roster: loggers[siteIndex]!.roster,
      at: [Math.floor(Date.now() / 1000)],
      string: [string],
      frames: [
        {
          voltageOut: r.map((x) => x.voltage),
          current: r.map((x) => x.current),
          temperature: r.map((x) => x.temperature),
          signal: r.map((x) => x.signal),
          via: r.map((x) => x.via),
          state: r.map((x) => x.state),
        },
      ],
    });
  };
  say(`sending ${READINGS_PER_S} readings/s for ${SECONDS} s`);
  const framesPerS = READINGS_PER_S / perFrame;
  const start = performance.now();
  let sent = 0;
  const load = setInterval(() => {
    const due = Math.floor(((performance.now() - start) / 1000) * framesPerS);
    for (; sent < due; sent++) {
      const s = sent % plant.sites.length;
      const string = Math.floor(sent / plant.sites.length) % plant.stringsPerSite;
      if (s === 0 && string === 3) continue; // the watched one is turned below
      loggers[s]!.send(frame(s, string, false));
    }
  }, 5);
  try {
    // two frames of one string in one second would be one frame: an event needs a second of its own
    while (performance.now() - start < SECONDS * 1000) {
      await new Promise((resolve) => setTimeout(resolve, 1050 + Math.random() * TURN_EVERY_MS));
      held = !held;
      const want = held ? 'shutdown' : 'passing';
      const from = performance.now();
      const took = await new Promise<number>((resolve, reject) => {
        const timer = setTimeout(() => reject(new Error('a change did not arrive in 10 s')), 10_000);
        const look = (state: string) => {
          if (state !== want) return;
          clearTimeout(timer);
          shown.splice(shown.indexOf(look), 1);
          resolve(performance.now() - from);
        };
        shown.push(look);
        loggers[0]!.send(frame(0, 3, held));
      });
      turns.push(took + RENDER_MS);
    }
  } finally {
    clearInterval(load);
    live.terminate();
    for (const l of loggers) l.close();
  }
  turns.sort((a, b) => a - b);
  figure('live.changes', turns.length, 'changes', 0);
  figure('live.p50_ms', percentile(turns, 0.5), 'ms', 1);
  figure('live.p95_ms', percentile(turns, 0.95), 'ms', 1);
}
