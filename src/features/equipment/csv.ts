import { asTyped, headerOf } from '../../domain/equipment/fields';
import { FIELDS } from '../../domain/equipment/plausibility';
import type { Catalogue, CatalogueItem } from '../../schemas/api/equipment';
import { writtenValue } from '../../schemas/equipment-file';
import { connectorNamesOf } from './list';

interface CsvColumn {
  header: string;
  value: (item: CatalogueItem) => string | number | null;
}

/** Every field of a family as a column that an import reads back, and how the type is used. */
export function csvColumns(catalogue: Catalogue): CsvColumn[] {
  const names = connectorNamesOf(catalogue);
  return [
    ...FIELDS[catalogue.family].map((field): CsvColumn => ({
      header: headerOf(field),
      value: ({ entry }) => {
        const value = entry[field.key];
        return field.kind === 'number' && typeof value === 'number'
          ? asTyped(field, value)
          : writtenValue(field, value, names);
      },
    })),
    { header: 'Archived', value: (item) => item.archivedAt?.slice(0, 10) ?? '' },
    { header: 'Strings', value: (item) => item.strings },
    { header: 'Sites', value: (item) => item.sites },
  ];
}
