import type { EquipmentFamily } from '../domain/equipment/families';
import { counted, countAtStart } from '../drawings/numbers';
import type { Catalogue, CatalogueItem } from '../schemas/api/equipment';
import { capital } from './domain-counts';

export const FAMILY_LABELS: Record<EquipmentFamily, string> = {
  modules: 'Modules',
  units: 'Units',
  connectors: 'Connectors',
  inverters: 'Inverters',
};
export const ONE: Record<EquipmentFamily, string> = {
  modules: 'module type',
  units: 'unit type',
  connectors: 'connector type',
  inverters: 'inverter type',
};

const FOLLOWS: Record<EquipmentFamily, string> = {
  modules: 'Expected voltages, design checks and low-output findings rest on these datasheets.',
  units:
    'What a reading means depends on how a unit behaves: screens that rest on it say “according to the type entered”.',
  connectors:
    'Two halves must be of identical type and maker, or documented as intermatable: that they click together proves nothing.',
  inverters: 'Design checks hold each string’s voltage and current against these limits.',
};

/** "Three strings at 1 site", "not used yet". */
export function usedWords(item: Pick<CatalogueItem, 'strings' | 'sites' | 'types'>): string {
  const parts = [
    ...(item.types > 0 ? [counted(item.types, 'type')] : []),
    ...(item.strings > 0 ? [`${counted(item.strings, 'string')} at ${counted(item.sites, 'site')}`] : []),
  ];
  return parts.length > 0 ? parts.join(', ') : 'not used yet';
}

/** The heading of a family's list: what is found. */
export function listFinding(catalogue: Catalogue): { heading: string; sentence: string } {
  const { family } = catalogue;
  const live = catalogue.items.filter((i) => i.archivedAt === null);
  const used = live.filter((i) => i.strings > 0 || i.types > 0).length;
  const sentence = FOLLOWS[family];
  if (live.length === 0)
    return {
      heading: `No ${ONE[family]} yet`,
      sentence: `${sentence} Enter the first, or import a file.`,
    };
  const many = live.length === 1 ? ONE[family] : `${ONE[family]}s`;
  const use =
    used === 0
      ? 'none in use'
      : used === live.length
        ? used === 1
          ? 'in use'
          : 'all in use'
        : `${countAtStart(used).toLowerCase()} in use`;
  return { heading: `${countAtStart(live.length)} ${many}, ${use}`, sentence };
}

/** What saving a change of a type touches; null where nothing rests on it. */
export function touches(item: CatalogueItem): string | null {
  if (item.strings === 0 && item.types === 0) return null;
  return `${capital(usedWords(item))} ${item.strings + item.types === 1 ? 'rests' : 'rest'} on this type: what is expected there, and the design checks, change when you save. The change is recorded with its before and after.`;
}
