import type { Knex } from 'knex';
import type pg from 'pg';
import {
  frameAt,
  loadString,
  shutdownSince,
  type LoadShape,
  type LoadString,
} from '../../simulator/load/frames';
import { readLedger } from '../../simulator/load/ledger';
import { SiteJudge } from '../../src/server/ingest/judge-site';
import { framesAfter, judgementsOf, type KeptJudgement } from '../../src/server/queries/judgement';
import { judgedSite } from '../../src/server/queries/judgement-contexts';
import type { Watcher } from './watcher';

/** What must hold when it is over. Each check gives what it looked at and what was wrong, in words. */
export interface Checked {
  looked: number;
  faults: string[];
}

interface Row {
  at: number;
  index: number;
  n: number;
  voltage: (number | null)[];
  current: (number | null)[];
  state: (number | null)[];
}

/** Every acknowledged frame is in the database once, as it was sent. */
export async function acknowledgedAreThere(
  db: pg.ClientBase,
  ledgers: readonly string[],
  shape: LoadShape,
): Promise<Checked> {
  const byLogger = new Map<string, Map<string, { at: number; index: number }>>();
  for (const file of ledgers)
    for await (const line of readLedger(file)) {
      if (line.type !== 'frames') continue;
      const of = byLogger.get(line.logger) ?? new Map<string, { at: number; index: number }>();
      byLogger.set(line.logger, of);
      for (const index of line.strings ?? []) of.set(`${index} ${line.at}`, { at: line.at, index });
    }
  const faults: string[] = [];
  let looked = 0;
  for (const [logger, wanted] of byLogger) {
    const times = [...wanted.values()].map((w) => w.at);
    const { rows } = await db.query<Row>(
      `select s.roster_index::int4 as index, extract(epoch from f.at)::int4 as at, count(*) over (partition by s.id, f.at)::int4 as n,
              f.voltage, f.current, f.state
       from logger l join string s on s.logger_id = l.id join string_frame f on f.string_id = s.id
       where l.serial = $1 and f.at between to_timestamp($2::int4) and to_timestamp($3::int4)`,
      [logger, Math.min(...times), Math.max(...times)],
    );
    const there = new Map(rows.map((r) => [`${r.index} ${r.at}`, r]));
    const strings = new Map<number, LoadString>();
    for (const [key, { at, index }] of wanted) {
      looked++;
      const row = there.get(key);
      if (!row) {
        faults.push(`${logger}: string ${index} at ${at} was acknowledged and is not there`);
        continue;
      }
      if (row.n !== 1) faults.push(`${logger}: string ${index} at ${at} is there ${row.n} times`);
      const string =
        strings.get(index) ??
        loadString(
          shape,
          logger,
          index,
          row.state.map(() => true),
        );
      strings.set(index, string);
      const sent = frameAt(shape, string, at, shutdownSince(shape, logger, at) !== null);
      for (const [name, kept, given] of [
        ['voltage', row.voltage, sent.voltageOut],
        ['current', row.current, sent.current],
        ['state', row.state, sent.state],
      ] as const)
        if (JSON.stringify(kept) !== JSON.stringify(given))
          faults.push(
            `${logger}: ${name} of string ${index} at ${at} is ${JSON.stringify(kept)}, sent was ${JSON.stringify(given)}`,
          );
    }
  }
  return { looked, faults };
}

/** What was judged before anything began, by site. */
export async function judgedBefore(db: Knex): Promise<Map<number, KeptJudgement[]>> {
  const sites = await db('site').select<{ id: number }[]>('id');
  const kept = new Map<number, KeptJudgement[]>();
  for (const { id } of sites) kept.set(id, await judgementsOf(db, id));
  return kept;
}

const FRAMES_A_READ = 2000;

/** State and verdict of each unit are those that come of its frames, judged again from where all began. */
export async function verdictsAreThose(db: Knex, before: Map<number, KeptJudgement[]>): Promise<Checked> {
  const faults: string[] = [];
  let looked = 0;
  const nowS = Math.floor(Date.now() / 1000);
  for (const [siteId, kept] of before) {
    const site = await judgedSite(db, siteId);
    if (!site) continue;
    const judge = new SiteJudge(site, structuredClone(kept), nowS);
    const behind = new Map([...judge.strings.values()].map((j) => [j.string.id, j.memory.atS]));
    while (behind.size > 0) {
      const frames = await framesAfter(
        db,
        [...behind].map(([stringId, atS]) => ({ stringId, atS })),
        FRAMES_A_READ,
      );
      const read = new Map<number, number>();
      for (const f of frames) {
        read.set(f.stringId, (read.get(f.stringId) ?? 0) + 1);
        behind.set(f.stringId, f.at);
        judge.frame(f.stringId, {
          atS: f.at,
          state: f.state,
          voltageOut: f.voltage,
          voltageIn: f.voltageIn ?? undefined,
        });
      }
      for (const id of [...behind.keys()]) if ((read.get(id) ?? 0) < FRAMES_A_READ) behind.delete(id);
    }
    for (const { stringId, kept: stored } of await judgementsOf(db, siteId)) {
      const judged = judge.strings.get(stringId);
      if (!judged || !stored) continue;
      const { memory } = stored;
      if (memory.sweptAtS > 0) judge.sweep(judged, memory.sweptAtS);
      looked += memory.state.length;
      const say = (what: string, is: unknown, anew: unknown): void =>
        void faults.push(
          `${what} of string ${stringId} (frames to ${memory.atS}, swept ${memory.sweptAtS}) is ${JSON.stringify(is)}, anew it is ${JSON.stringify(anew)}`,
        );
      if (memory.atS !== judged.memory.atS) say('the newest frame judged', memory.atS, judged.memory.atS);
      else if (String(memory.state) !== String(judged.memory.state))
        say('state', memory.state, judged.memory.state);
      else if (String(memory.verdict) !== String(judged.memory.verdict))
        say('verdict', memory.verdict, judged.memory.verdict);
    }
  }
  return { looked, faults };
}

/** Each watcher was told each event of its sites once. */
export async function watchersSawAll(db: pg.ClientBase, watchers: readonly Watcher[]): Promise<Checked> {
  const faults: string[] = [];
  let looked = 0;
  for (const [i, watcher] of watchers.entries()) {
    const due = new Set<string>();
    for (const ref of watcher.siteRefs) {
      const began = watcher.began.get(`site:${ref}`);
      if (began === undefined) {
        faults.push(`client ${i} was never told of site ${ref}`);
        continue;
      }
      const { rows } = await db.query<{ id: string; kind: string }>(
        `select e.id::text as id, e.kind from event e join site on site.id = e.site_id
         where site.ref = $1 and e.xid >= $2::xid8`,
        [ref, began],
      );
      for (const { id, kind } of rows) {
        looked++;
        due.add(id);
        const times = watcher.told.get(id) ?? 0;
        if (times !== 1) faults.push(`client ${i} was told of event ${id} (${kind}) ${times} times`);
      }
    }
    for (const id of watcher.told.keys())
      if (!due.has(id))
        faults.push(`client ${i} was told of event ${id}, which is not of its sites and time`);
  }
  return { looked, faults };
}

/** Jobs: whatever was begun and not ended belongs to a process that was killed; nothing is left locked. */
export async function jobsGoOn(db: pg.ClientBase): Promise<Checked> {
  const { rows } = await db.query<{ runs: number; failed: number; locked: number }>(
    `select (select count(*)::int4 from job_run) as runs,
            (select count(*)::int4 from job_run where failed is not null) as failed,
            (select count(*)::int4 from graphile_worker.jobs where locked_at is not null) as locked`,
  );
  const { runs = 0, locked = 0 } = rows[0] ?? {};
  return {
    looked: runs,
    faults: locked > 0 ? [`${locked} jobs are locked after every worker has ended`] : [],
  };
}
