import type { Recipient } from '../../domain/notices/decide';
import type { RecipientRow } from '../queries/notices-tell';

/** A person as the rules look at one. */
export const recipientOf = (row: RecipientRow): Recipient => ({
  personId: row.personId,
  role: row.role,
  active: true,
  timeZone: row.timeZone,
  sees: row.role === 'customer' ? row.sites : 'all',
  choice: {
    rules: row.rules,
    sites: row.chosenSites,
    digestAt: row.digestAt,
    quiet: row.quietFrom === null || row.quietTo === null ? null : { from: row.quietFrom, to: row.quietTo },
  },
});
