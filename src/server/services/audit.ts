import type { AuditPage, AuditView } from '../../schemas/api/audit';
import type { Tx } from '../db/transaction';
import { auditEntries } from '../queries/audit';

const A_PAGE = 100;

/** One page of who did what. */
export async function auditPage(tx: Tx, view: AuditView, at: Date): Promise<AuditPage> {
  const items = await auditEntries(tx, view, A_PAGE + 1);
  const shown = items.slice(0, A_PAGE);
  return {
    at: at.toISOString(),
    items: shown,
    next: items.length > A_PAGE ? (shown.at(-1)?.id ?? null) : null,
  };
}
