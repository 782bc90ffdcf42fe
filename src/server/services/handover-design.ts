import type { Tx } from '../db/transaction';
import { designFindings } from './design-findings';

/** Design checks that are exceeded, one sentence each, for the papers. */
export async function designWords(tx: Tx, siteId: number, at: Date): Promise<string[]> {
  const { findings } = await designFindings(tx, siteId, at);
  return findings
    .filter((f) => f.outcome === 'exceeded')
    .map((f) => `${f.strings.map((s) => s.name).join(', ')}: ${f.words} (${f.clause})`);
}
