import type { ClientBase } from 'pg';

export interface Inventory {
  tables: Map<string, { rows: string; sum: string }>;
  rules: Map<string, string[]>;
  newest: { newest: string | null; strings: number };
}
export function inventoryOf(db: ClientBase): Promise<Inventory>;
export function sequencesOf(db: ClientBase): Promise<Map<string, bigint>>;
export function differences(kept: Inventory, restored: Inventory): string[];
export function sequencesBehind(kept: Map<string, bigint>, restored: Map<string, bigint>): string[];
