import pg from 'pg';
import { usedBy } from './fleet/process';
import { loadOn, lookerAt, printer, say, stageFleet, type Looker, type Staged } from './fleet/stage';
import { serve } from './ingest/server';
import { paths } from '../../src/schemas/paths';
import { closePools } from '../../src/server/db/pools';
import type { LoadRun } from '../../simulator/load/run';

/**
 * The steady state of a big fleet on this machine: every unit reports once a minute, people look, jobs run, all in one
 * server process. Then hours of an outage that come all at once, and ten times the rate for a while. `BENCH_UNITS`,
 * `BENCH_MINUTES` (steady), `BENCH_PEOPLE`.
 */
const PORT = Number(process.env.BENCH_PORT ?? 4442);
const UNITS = Number(process.env.BENCH_UNITS ?? 100_000);
const MINUTES = Number(process.env.BENCH_MINUTES ?? 2);
const PEOPLE = Number(process.env.BENCH_PEOPLE ?? 12);
const WARM_UP_S = 20;
const SAMPLE_MS = 5000;
/** Hours that every logger is behind in the burst, and seconds that it may take. */
const BURST_HOURS = Number(process.env.BENCH_BURST_HOURS ?? 1);
const BURST_S = 45;
const TENFOLD_S = 30;
/** Each of the people opens a page every so often, ms. */
const LOOK_EVERY_MS = 5000;
const figure = printer('load');

const sleep = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

async function connected(load: LoadRun): Promise<void> {
  const deadline = Date.now() + 90_000;
  while (load.connected() < load.loggers.length && Date.now() < deadline) await sleep(200);
  say(`${load.connected()} of ${load.loggers.length} loggers are connected`);
}

/** Delay of the server's event loop since it was last asked, s; undefined: the server doesn't tell. */
async function loopDelay(quantile: string): Promise<number | undefined> {
  const answer = await fetch(`http://127.0.0.1:${PORT}/metrics`);
  if (!answer.ok) return undefined;
  const found = new RegExp(
    `^wakeline_event_loop_delay_seconds\\{quantile="${quantile}"\\} (\\S+)$`,
    'm',
  ).exec(await answer.text());
  return found ? Number(found[1]) : undefined;
}

/** People who look at the fleet, its sites and strings, one page each every few seconds, until told to stop. */
function people(looker: Looker, pages: readonly string[]): { ms: number[]; stop(): Promise<void> } {
  const ms: number[] = [];
  let on = true;
  const all = Array.from({ length: PEOPLE }, async (_, p) => {
    await sleep((p * LOOK_EVERY_MS) / PEOPLE);
    for (let i = p; on; i += 5) {
      const took = await looker.get(pages[i % pages.length] ?? paths.fleet());
      ms.push(took.ms);
      await sleep(Math.max(0, LOOK_EVERY_MS - took.ms));
    }
  });
  return {
    ms,
    stop: async () => {
      on = false;
      await Promise.all(all);
    },
  };
}

interface Watched {
  cpuS: number;
  seconds: number;
  rss: { atS: number; bytes: number }[];
  delays: number[];
}

async function watch(pid: number, until: Promise<unknown>): Promise<Watched> {
  const begun = performance.now();
  const before = usedBy(pid).cpuS;
  const rss: Watched['rss'] = [];
  const delays: number[] = [];
  let over = false;
  void until.finally(() => {
    over = true;
  });
  while (!over) {
    await Promise.race([until, sleep(SAMPLE_MS)]);
    rss.push({ atS: (performance.now() - begun) / 1000, bytes: usedBy(pid).rss });
    const delay = await loopDelay('0.99');
    if (delay !== undefined) delays.push(delay);
  }
  return { cpuS: usedBy(pid).cpuS - before, seconds: (performance.now() - begun) / 1000, rss, delays };
}

/** Bytes a minute by which a line through the samples rises (least squares). */
function growth(samples: Watched['rss']): number {
  const n = samples.length;
  if (n < 3) return NaN;
  const x = samples.reduce((s, r) => s + r.atS, 0) / n;
  const y = samples.reduce((s, r) => s + r.bytes, 0) / n;
  const over = samples.reduce((s, r) => s + (r.atS - x) * (r.bytes - y), 0);
  const under = samples.reduce((s, r) => s + (r.atS - x) ** 2, 0);
  return (60 * over) / under;
}

function tell(name: string, load: LoadRun, w: Watched): void {
  const { figures } = load;
  figure(`${name}_acknowledged_per_s`, figures.acknowledgedReadings / w.seconds, '1/s', 0);
  figure(`${name}_refused`, figures.refused, 'messages', 0);
  figure(`${name}_waits`, figures.waits, 'times', 0);
  for (const [at, share] of [
    ['p50', 0.5],
    ['p95', 0.95],
    ['p99', 0.99],
  ] as const)
    figure(`${name}_ack_${at}_ms`, figures.latencyMs(share), 'ms');
  figure(`${name}_ack_max_ms`, figures.latencyMaxMs, 'ms');
  figure(`${name}_cpu_share`, w.cpuS / w.seconds, 'cores', 2);
  if (w.delays.length > 0) figure(`${name}_loop_delay_p99_ms`, 1000 * Math.max(...w.delays), 'ms');
  const last = w.rss.at(-1);
  if (last) figure(`${name}_rss_mb`, last.bytes / 1e6, 'MB', 0);
}

async function run(db: pg.Client, staged: Staged): Promise<void> {
  const server = await serve(PORT, 'web,ingest,worker');
  try {
    const looker = await lookerAt(db, PORT);
    const { rows } = await db.query<{ site: string; string: string }>(
      `select site.ref as site, s.ref as string from string s join site on site.id = s.site_id
       where site.organisation_id = $1 order by md5(s.id::text) limit 40`,
      [looker.organisationId],
    );
    const pages = [
      paths.fleet(),
      ...rows.flatMap((r) => [paths.site(r.site), paths.string(r.site, r.string)]),
      paths.shutdown(),
      paths.lowOutput(),
    ];
    const seconds = WARM_UP_S + MINUTES * 60;
    const steady = loadOn(staged, PORT, { duration: seconds + 30, ramp: 10 });
    await connected(steady);
    await sleep(WARM_UP_S * 1000);
    steady.figures.newPhase();
    const before = steady.figures.acknowledgedReadings;
    const looking = people(looker, pages);
    await loopDelay('0.99'); // begins anew
    say(`steady for ${MINUTES} minutes, ${PEOPLE} people look`);
    const watched = await watch(server.pid, sleep(MINUTES * 60_000));
    await looking.stop();
    steady.figures.acknowledgedReadings -= before;
    tell('steady', steady, watched);
    figure('steady_rss_growth_mb_per_min', growth(watched.rss) / 1e6, 'MB/min', 2);
    looking.ms.sort((a, b) => a - b);
    figure('steady_pages', looking.ms.length, 'pages', 0);
    figure('steady_page_p95_ms', looking.ms[Math.floor(looking.ms.length * 0.95)] ?? NaN, 'ms');
    await steady.stop();

    say(`${BURST_HOURS} hours of every logger at once`);
    const burst = loadOn(staged, PORT, {
      duration: BURST_S,
      ramp: 2,
      backlog: BURST_HOURS * 3600,
      window: 1,
    });
    tell('burst', burst, await watch(server.pid, burst.done));

    say('ten times the rate');
    const tenfold = loadOn(staged, PORT, { duration: TENFOLD_S, ramp: 2, speed: 10 });
    tell('tenfold', tenfold, await watch(server.pid, tenfold.done));
  } finally {
    await server.stop();
  }
}

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
try {
  const staged = await stageFleet(UNITS / 100);
  figure('seed_s', staged.seconds, 's');
  await run(db, staged);
} finally {
  await closePools();
  await db.end();
}
