import { once } from 'node:events';
import type { Knex } from 'knex';
import type pg from 'pg';
import { from as copyFrom, type CopyStreamQuery } from 'pg-copy-streams';

/** Rows on their way into one table by COPY, in the transaction given. One at a time: a connection carries one COPY. */
export class CopyInto {
  private buffer: string[] = [];
  private size = 0;
  rows = 0;

  private constructor(private readonly stream: CopyStreamQuery) {}

  static async open(transaction: Knex.Transaction, table: string, columns: string[]): Promise<CopyInto> {
    const client = transaction.client as { acquireConnection(): Promise<pg.Client> };
    const connection = await client.acquireConnection();
    return new CopyInto(connection.query(copyFrom(`copy ${table} (${columns.join(', ')}) from stdin`)));
  }

  /** One row in COPY's text format, without its line end. */
  write(line: string): void {
    this.buffer.push(line);
    this.size += line.length;
    this.rows += 1;
  }

  /** Sends what has gathered and waits while the server is behind; call it now and then between rows. */
  async breathe(least = 262_144): Promise<void> {
    if (this.size <= least) return;
    const text = this.buffer.join('\n') + '\n';
    this.buffer = [];
    this.size = 0;
    await this.send(text);
  }

  async send(block: string | Buffer): Promise<void> {
    if (!this.stream.write(block)) await once(this.stream, 'drain');
  }

  async close(): Promise<void> {
    await this.breathe(0);
    this.stream.end();
    await once(this.stream, 'finish');
  }
}

/** Rows that wait for their COPY, as bytes: hundreds of thousands of texts would keep the collector busy. */
export class WaitingRows {
  private readonly blocks: Buffer[] = [];
  private open: string[] = [];
  private size = 0;

  push(line: string): void {
    this.open.push(line);
    this.size += line.length;
    if (this.size > 131_072) this.seal();
  }

  private seal(): void {
    if (this.open.length === 0) return;
    this.blocks.push(Buffer.from(this.open.join('\n') + '\n'));
    this.open = [];
    this.size = 0;
  }

  all(): readonly Buffer[] {
    this.seal();
    return this.blocks;
  }
}

/** Copies rows that were gathered in memory. */
export async function copyRows(
  transaction: Knex.Transaction,
  table: string,
  columns: string[],
  rows: WaitingRows,
): Promise<void> {
  const copy = await CopyInto.open(transaction, table, columns);
  for (const block of rows.all()) await copy.send(block);
  await copy.close();
}

/** Copies rows as they are made; gives their number. */
export async function copyMade(
  transaction: Knex.Transaction,
  table: string,
  columns: string[],
  rows: Iterable<string>,
): Promise<number> {
  const copy = await CopyInto.open(transaction, table, columns);
  for (const row of rows) {
    copy.write(row);
    await copy.breathe();
  }
  await copy.close();
  return copy.rows;
}

/** A value of COPY's text format. */
export const field = (value: number | string | null): string => (value === null ? '\\N' : String(value));

/** An array of numbers as PostgreSQL writes it; `\N` for none at all. */
export function arrayField(values: readonly (number | null)[] | undefined): string {
  if (!values) return '\\N';
  let text = '{';
  for (let i = 0; i < values.length; i++) text += `${i === 0 ? '' : ','}${values[i] ?? 'NULL'}`;
  return text + '}';
}

/** An instant as PostgreSQL reads it, from epoch seconds; the last is remembered, since rows come in runs. */
let lastS = NaN;
let lastText = '';
export function instant(atS: number): string {
  if (atS !== lastS) [lastS, lastText] = [atS, new Date(atS * 1000).toISOString()];
  return lastText;
}
