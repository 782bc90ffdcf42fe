import type { Tx } from '../../db/transaction';
import { found } from '../../errors';
import { paperOf } from '../../queries/handover';
import { fileName } from '../csv';

const TYPES = { pdf: 'application/pdf', csv: 'text/csv; charset=utf-8; header=present' } as const;

/**
 * A kept paper as a download, byte for byte as it was made.
 * @throws AppError not_found
 */
export async function paperResponse(tx: Tx, ref: string, form: 'pdf' | 'csv'): Promise<Response> {
  const paper = found(await paperOf(tx, ref, form), 'paper');
  const name = fileName(`${paper.site}-handover-${paper.version}`);
  return new Response(new Uint8Array(paper.bytes), {
    headers: {
      'content-type': TYPES[form],
      'content-disposition': `attachment; filename="${name}.${form}"`,
      'cache-control': 'private, no-store',
      'x-content-type-options': 'nosniff',
    },
  });
}
