import type { Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { KIND_WORDS } from '../../domain/equipment/unit-fields';
import type { UnitKind } from '../../domain/equipment/unit-type';
import { number, power, quantity } from '../../drawings/numbers';
import type { Catalogue, CatalogueItem } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { connectorNamesOf, nameOf } from './list';
import { usedWords } from '../../words/equipment-sentences';
import { equipmentListColumns } from '../../words/equipment';

type Row = CatalogueItem;
const n = (row: Row, key: string): number | null => {
  const value = row.entry[key];
  return typeof value === 'number' ? value : null;
};
const text = (row: Row, key: string): string => String(row.entry[key] ?? '');
const figure = (
  key: string,
  label: string,
  write: (value: number | null) => string,
  from?: Column<Row>['from'],
): Column<Row> => ({
  key,
  label,
  numeric: true,
  sortable: true,
  ...(from ? { from } : {}),
  cell: (row) => write(n(row, key)),
});
const current = (value: number | null): string =>
  quantity(value, 'A', value !== null && !Number.isInteger(value) ? 1 : 0);
const volts = (value: number | null): string => quantity(value, 'V', value !== null && value < 100 ? 1 : 0);
const kiloWatts = (value: number | null): string => power(value);
const watts = (row: Row): number => (n(row, 'vmpRef') ?? 0) * (n(row, 'impRef') ?? 0);

/** What a phone shows under the name. */
function inShort(family: Catalogue['family'], row: Row): string {
  switch (family) {
    case 'modules':
      return equipmentListColumns.vocIsc(watts(row), n(row, 'vocRef'), n(row, 'iscRef'));
    case 'units':
      return equipmentListColumns.inShutdown(
        KIND_WORDS[text(row, 'kind') as UnitKind],
        n(row, 'shutdownVoltageNominal'),
      );
    case 'connectors':
      return `${text(row, 'maker')} ${text(row, 'family')}`;
    case 'inverters':
      return `${kiloWatts(n(row, 'acPowerMax'))}, ${volts(n(row, 'voltageMax'))}`;
  }
}

const MIDDLE: Record<Catalogue['family'], (names: Map<string, string>) => Column<Row>[]> = {
  modules: (names) => [
    {
      key: 'power',
      label: equipmentListColumns.power,
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (row) => power(watts(row)),
    },
    figure('vocRef', 'Voc', volts, 'sm'),
    figure('iscRef', 'Isc', (v) => quantity(v, 'A', 2), 'sm'),
    figure(
      'betaVoc',
      equipmentListColumns.vocPerK,
      (v) => quantity(v === null ? null : 100 * v, '%', 2),
      'md',
    ),
    {
      key: 'connector',
      label: equipmentListColumns.connector,
      from: 'lg',
      cell: (row) =>
        names.get(text(row, 'connector')) ?? (
          <span className="text-ink-2">{equipmentListColumns.notEntered}</span>
        ),
    },
  ],
  units: () => [
    {
      key: 'kind',
      label: equipmentListColumns.kind,
      sortable: true,
      from: 'sm',
      cell: (row) => KIND_WORDS[text(row, 'kind') as UnitKind],
    },
    figure('shutdownVoltageNominal', equipmentListColumns.inShutdown2, (v) => quantity(v, 'V', 2), 'sm'),
    figure('voltageInMax', equipmentListColumns.inputUpTo, volts, 'md'),
    figure('currentMax', equipmentListColumns.currentUpTo, current, 'md'),
    figure(
      'insulationTestMax',
      equipmentListColumns.insulationTest,
      (v) => (v === null ? equipmentListColumns.noneAllowed : volts(v)),
      'lg',
    ),
  ],
  connectors: () => [
    {
      key: 'maker',
      label: equipmentListColumns.maker,
      sortable: true,
      from: 'sm',
      cell: (row) => text(row, 'maker'),
    },
    {
      key: 'family',
      label: equipmentListColumns.type,
      sortable: true,
      from: 'sm',
      cell: (row) => text(row, 'family'),
    },
    figure('voltageMax', equipmentListColumns.upTo, volts, 'md'),
    figure('currentMax', equipmentListColumns.currentUpTo, current, 'md'),
  ],
  inverters: () => [
    figure('acPowerMax', equipmentListColumns.acPower, kiloWatts, 'sm'),
    figure('inputs', equipmentListColumns.inputs, (v) => number(v), 'sm'),
    figure('voltageMax', equipmentListColumns.dcUpTo, volts, 'sm'),
    {
      key: 'mpptMin',
      label: equipmentListColumns.mpptWindow,
      numeric: true,
      sortable: true,
      from: 'md',
      cell: (row) => equipmentListColumns.rowToRow(n(row, 'mpptMin'), n(row, 'mpptMax')),
    },
    figure('iscMax', equipmentListColumns.iscOfOneInput, current, 'lg'),
  ],
};

export function listColumns(catalogue: Catalogue): Column<Row>[] {
  const { family } = catalogue;
  return [
    {
      key: 'name',
      label: equipmentListColumns.name,
      sortable: true,
      cell: (row) => (
        <>
          <a
            href={paths.equipmentType(family, row.id)}
            className="target inline-flex items-center text-[15px] font-semibold tracking-[-0.01em] hover:underline"
          >
            {nameOf(row)}
          </a>
          {row.archivedAt && (
            <span className="ml-2">
              <Tag tone="slate">{equipmentListColumns.archived}</Tag>
            </span>
          )}
          <p className="text-sm text-ink-2 sm:hidden">{inShort(family, row)}</p>
        </>
      ),
    },
    ...MIDDLE[family](connectorNamesOf(catalogue)),
    {
      key: 'use',
      label: equipmentListColumns.inUse,
      numeric: true,
      sortable: true,
      cell: (row) => (
        <span className={row.strings + row.types > 0 ? '' : 'text-ink-2'}>
          <span aria-hidden="true">
            {row.types > 0 && (
              <span className="block sm:inline">
                {equipmentListColumns.countedTypesType(row.types)}
                {row.strings > 0 && <span className="hidden sm:inline">, </span>}
              </span>
            )}
            {row.strings > 0 && equipmentListColumns.countedStringsString(row.strings)}
            {row.strings + row.types === 0 && '–'}
          </span>
          <span className="sr-only">{usedWords(row)}</span>
        </span>
      ),
    },
  ];
}
