import type { Inventory } from './inventory.mjs';

export interface Restored {
  kept: Inventory;
  /** Where sequences stood. */
  sequences: Map<string, bigint>;
  /** Superuser's address of the restored database. */
  restoredUrl: string;
  figures: { held_ms: number; backup_s: number; restore_s: number };
}
export function drillBaseBackup(
  what: {
    superUrl: string;
    folder: string;
    meanwhile?: (when: 'after the backup' | 'after the moment') => Promise<void>;
  },
  check: (restored: Restored) => Promise<void>,
): Promise<void>;
export function drillDump(
  what: { url: string; folder: string; isSuper: boolean },
  check: (restored: Restored) => Promise<void>,
): Promise<void>;
