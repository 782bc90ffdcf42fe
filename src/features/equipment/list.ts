import { FIELDS } from '../../domain/equipment/plausibility';
import type { Catalogue, CatalogueItem, EquipmentView } from '../../schemas/api/equipment';
import { writtenValue } from '../../schemas/equipment-file';

export const EQUIPMENT_DEFAULTS: EquipmentView = { q: '', show: 'in_use', sort: 'name', order: 'up' };

const byText = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** How a type is used: the words of the list. */
export const nameOf = (item: CatalogueItem): string => String(item.entry.name ?? '');

export const connectorNamesOf = (catalogue: Pick<Catalogue, 'connectors'>): Map<string, string> =>
  new Map(catalogue.connectors.map((c) => [c.id, c.name]));

/** The value of a list's column, to sort by; figures as figures. */
export function sortValue(item: CatalogueItem, key: string): string | number {
  if (key === 'use') return item.strings + item.types / 1000;
  if (key === 'power') return Number(item.entry.vmpRef ?? 0) * Number(item.entry.impRef ?? 0);
  return item.entry[key] ?? '';
}

/** The types that a view shows, in its order; names settle what is equal. */
export function shownItems(catalogue: Catalogue, view: EquipmentView): CatalogueItem[] {
  const names = connectorNamesOf(catalogue);
  const wanted = view.q.toLocaleLowerCase('en');
  const words = (item: CatalogueItem) =>
    FIELDS[catalogue.family]
      .filter((f) => f.kind !== 'number')
      .map((f) => writtenValue(f, item.entry[f.key], names))
      .join(' ')
      .toLocaleLowerCase('en');
  return catalogue.items
    .filter(
      (item) =>
        (view.show === 'all' || (view.show === 'archived') === (item.archivedAt !== null)) &&
        (wanted === '' || words(item).includes(wanted)),
    )
    .sort((a, b) => {
      const [x, y] = [sortValue(a, view.sort), sortValue(b, view.sort)];
      const gap =
        typeof x === 'number' && typeof y === 'number' ? x - y : byText.compare(String(x), String(y));
      return (view.order === 'up' ? gap : -gap) || byText.compare(nameOf(a), nameOf(b));
    });
}
