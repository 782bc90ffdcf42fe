import type { Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { KIND_WORDS } from '../../domain/equipment/unit-fields';
import type { UnitKind } from '../../domain/equipment/unit-type';
import { amperes, counted, number, power, quantity } from '../../drawings/numbers';
import type { Catalogue, CatalogueItem } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { connectorNamesOf, nameOf } from './list';
import { usedWords } from './words';

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
      return `${power(watts(row))}, voc ${volts(n(row, 'vocRef'))}, isc ${amperes(n(row, 'iscRef'))}`;
    case 'units':
      return `${KIND_WORDS[text(row, 'kind') as UnitKind]}, ${quantity(n(row, 'shutdownVoltageNominal'), 'V', 2)} in shutdown`;
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
      label: 'Power',
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (row) => power(watts(row)),
    },
    figure('vocRef', 'Voc', volts, 'sm'),
    figure('iscRef', 'Isc', (v) => quantity(v, 'A', 2), 'sm'),
    figure('betaVoc', 'Voc per K', (v) => quantity(v === null ? null : 100 * v, '%', 2), 'md'),
    {
      key: 'connector',
      label: 'Connector',
      from: 'lg',
      cell: (row) => names.get(text(row, 'connector')) ?? <span className="text-ink-2">not entered</span>,
    },
  ],
  units: () => [
    {
      key: 'kind',
      label: 'Kind',
      sortable: true,
      from: 'sm',
      cell: (row) => KIND_WORDS[text(row, 'kind') as UnitKind],
    },
    figure('shutdownVoltageNominal', 'In shutdown', (v) => quantity(v, 'V', 2), 'sm'),
    figure('voltageInMax', 'Input up to', volts, 'md'),
    figure('currentMax', 'Current up to', current, 'md'),
    figure('insulationTestMax', 'Insulation test', (v) => (v === null ? 'none allowed' : volts(v)), 'lg'),
  ],
  connectors: () => [
    { key: 'maker', label: 'Maker', sortable: true, from: 'sm', cell: (row) => text(row, 'maker') },
    { key: 'family', label: 'Type', sortable: true, from: 'sm', cell: (row) => text(row, 'family') },
    figure('voltageMax', 'Up to', volts, 'md'),
    figure('currentMax', 'Current up to', current, 'md'),
  ],
  inverters: () => [
    figure('acPowerMax', 'AC power', kiloWatts, 'sm'),
    figure('inputs', 'Inputs', (v) => number(v), 'sm'),
    figure('voltageMax', 'DC up to', volts, 'sm'),
    {
      key: 'mpptMin',
      label: 'MPPT window',
      numeric: true,
      sortable: true,
      from: 'md',
      cell: (row) => `${number(n(row, 'mpptMin'))} to ${volts(n(row, 'mpptMax'))}`,
    },
    figure('iscMax', 'Isc of one input', current, 'lg'),
  ],
};

export function listColumns(catalogue: Catalogue): Column<Row>[] {
  const { family } = catalogue;
  return [
    {
      key: 'name',
      label: 'Name',
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
              <Tag tone="slate">Archived</Tag>
            </span>
          )}
          <p className="text-sm text-ink-2 sm:hidden">{inShort(family, row)}</p>
        </>
      ),
    },
    ...MIDDLE[family](connectorNamesOf(catalogue)),
    {
      key: 'use',
      label: 'In use',
      numeric: true,
      sortable: true,
      cell: (row) => (
        <span className={row.strings + row.types > 0 ? '' : 'text-ink-2'}>
          <span aria-hidden="true">
            {row.types > 0 && (
              <span className="block sm:inline">
                {counted(row.types, 'type')}
                {row.strings > 0 && <span className="hidden sm:inline">, </span>}
              </span>
            )}
            {row.strings > 0 && counted(row.strings, 'string')}
            {row.strings + row.types === 0 && '–'}
          </span>
          <span className="sr-only">{usedWords(row)}</span>
        </span>
      ),
    },
  ];
}
