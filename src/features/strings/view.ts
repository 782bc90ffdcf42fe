import { addressOf } from '../../lib/view-in-url';
import type { SlotNow } from '../../schemas/api/now';
import { UNITS_CHOSEN_MOST, WORKBENCH_DEFAULTS, type WorkbenchView } from '../../schemas/api/workbench-view';

/** What the page shows, as its address says it. */

export const DEFAULTS: WorkbenchView = WORKBENCH_DEFAULTS;

/** Positions in trouble: those that a person looks at first. */
export const inTrouble = (slots: readonly SlotNow[]): number[] =>
  slots
    .filter((s) => s.verdict !== null && s.verdict !== 'ok' && s.verdict !== 'unconfirmed')
    .map((s) => s.position)
    .slice(0, UNITS_CHOSEN_MOST);

/** The positions of the address; without any, those in trouble. */
export function chosenUnits(view: Pick<WorkbenchView, 'units'>, slots: readonly SlotNow[]): number[] {
  if (view.units === 'none') return [];
  if (view.units === '') return inTrouble(slots);
  const there = new Set(slots.map((s) => s.position));
  return [...new Set(view.units.split(',').map(Number))].filter((p) => there.has(p));
}

export const unitsInAddress = (positions: readonly number[]): string =>
  positions.length === 0 ? 'none' : [...positions].sort((a, b) => a - b).join(',');

/**
 * The address of exactly this view: what stands for "today", "now" and "those in trouble" is written out, so that it
 * shows the same tomorrow.
 */
export function permanentAddress(
  path: string,
  view: WorkbenchView,
  present: { day: string; atS: number; units: readonly number[] },
): string {
  return addressOf(
    path,
    {
      ...view,
      on: view.on || present.day,
      at: view.at || String(Math.floor(present.atS / 60) * 60),
      units: view.units || unitsInAddress(present.units),
    },
    DEFAULTS,
  );
}

/** The day `days` after another; dates as 2026-11-03. */
export function shifted(day: string, days: number): string {
  const at = new Date(`${day}T12:00:00Z`);
  at.setUTCDate(at.getUTCDate() + days);
  return at.toISOString().slice(0, 10);
}
