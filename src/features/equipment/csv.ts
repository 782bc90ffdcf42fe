import { asTyped, headerOf } from '../../domain/equipment/fields';
import { FIELDS } from '../../domain/equipment/plausibility';
import type { Catalogue, CatalogueItem } from '../../schemas/api/equipment';
import { writtenValue } from '../../schemas/equipment-file';
import { connectorNamesOf } from './list';
import { equipmentHeads } from '../../words/csv-heads';

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
    { header: equipmentHeads.archived, value: (item) => item.archivedAt?.slice(0, 10) ?? '' },
    { header: equipmentHeads.strings, value: (item) => item.strings },
    { header: equipmentHeads.sites, value: (item) => item.sites },
  ];
}
