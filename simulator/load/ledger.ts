import { createReadStream, createWriteStream, type WriteStream } from 'node:fs';
import { once } from 'node:events';
import { createInterface } from 'node:readline';

/** One message that Wakeline acknowledged: from then on it is Wakeline's to keep. */
export interface LedgerLine {
  logger: string;
  seq: number;
  type: string;
  /** The instant of the report, epoch s, and, of frames, the roster indices of the strings in it. */
  at: number;
  strings?: number[];
}

/** What was acknowledged, one JSON object a line in a file, or in memory where no file is named. */
export class Ledger {
  readonly lines: LedgerLine[] = [];
  private readonly out: WriteStream | null;

  constructor(file?: string) {
    this.out = file === undefined ? null : createWriteStream(file, { flags: 'a' });
  }

  add(line: LedgerLine): void {
    if (this.out) this.out.write(`${JSON.stringify(line)}\n`);
    else this.lines.push(line);
  }

  async close(): Promise<void> {
    if (!this.out) return;
    this.out.end();
    await once(this.out, 'finish');
  }
}

/** A ledger's lines, whole ones only: the last may have been cut off. */
export async function* readLedger(file: string): AsyncGenerator<LedgerLine> {
  for await (const line of createInterface({ input: createReadStream(file) }))
    if (line.endsWith('}')) yield JSON.parse(line) as LedgerLine;
}
