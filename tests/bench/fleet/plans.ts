import { mkdir, writeFile } from 'node:fs/promises';
import path from 'node:path';
import type { Knex } from 'knex';
import { asActor, type ActorSight, type Tx } from '../../../src/server/db/transaction';

interface Asked {
  sql: string;
  bindings: Knex.Value[];
}

/** What a page's queries did, with the plan of each. */
export interface Planned {
  queries: number;
  ms: number;
  /** Tables of frames that a plan reads from end to end. */
  wholeFrames: string[];
}

const FRAMES = /Seq Scan on ((?:string|input|inverter|weather)_frame\S*)/g;

/**
 * Runs a page's reading once as its actor, asks for each of its queries again under EXPLAIN (ANALYZE, BUFFERS) with the
 * same values in the same transaction, and writes the plans to a file.
 */
export async function plansOf(
  actor: ActorSight,
  read: (tx: Tx) => Promise<unknown>,
  file: string,
): Promise<Planned> {
  const asked: Asked[] = [];
  const plans: string[] = [];
  let ms = 0;
  const wholeFrames = new Set<string>();
  await asActor(actor, async (tx) => {
    const hear = (query: Asked) => {
      if (/^\s*(\(|with|select)/i.test(query.sql) && !/set_config|advisory/.test(query.sql))
        asked.push(query);
    };
    tx.on('query', hear);
    await read(tx);
    tx.removeListener('query', hear);
    const client = tx.client as {
      acquireConnection(): Promise<{ query: (q: object) => Promise<{ rows: Record<string, string>[] }> }>;
    };
    const connection = await client.acquireConnection();
    for (const { sql, bindings } of asked) {
      const { rows } = await connection.query({
        text: `explain (analyze, buffers) ${sql}`,
        values: bindings,
      });
      const plan = rows.map((r) => r['QUERY PLAN'] ?? '').join('\n');
      ms +=
        Number(/Execution Time: ([\d.]+)/.exec(plan)?.[1] ?? 0) +
        Number(/Planning Time: ([\d.]+)/.exec(plan)?.[1] ?? 0);
      for (const [, table] of plan.matchAll(FRAMES))
        if (table && !isSmall(plan, table)) wholeFrames.add(table);
      plans.push(`${sql.trim()}\n\n${plan}\n`);
    }
  });
  await mkdir(path.dirname(file), { recursive: true });
  await writeFile(file, plans.join(`\n${'-'.repeat(80)}\n\n`));
  return { queries: asked.length, ms, wholeFrames: [...wholeFrames] };
}

/** A partition without a row is read from end to end for nothing: that is the quickest way. */
const isSmall = (plan: string, table: string): boolean =>
  new RegExp(`Seq Scan on ${table}[^\\n]*(rows=0 loops=\\d+\\)|never executed)`).test(plan);
