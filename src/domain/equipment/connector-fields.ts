import { NAME_FIELD, type Entry, type Field } from './fields';

const MAKER = 'As the connector says';
const LIMITS = 'Limits';

export const CONNECTOR_FIELDS: readonly Field[] = [
  NAME_FIELD,
  {
    kind: 'text',
    key: 'maker',
    column: 'maker',
    label: 'Maker',
    group: MAKER,
    longest: 80,
    hint: 'As embossed. Two halves are identical only if maker and type are.',
  },
  {
    kind: 'text',
    key: 'family',
    column: 'family',
    label: 'Type',
    group: MAKER,
    longest: 80,
    hint: 'The maker’s own designation.',
  },
  {
    kind: 'text',
    key: 'tool',
    column: 'tool',
    label: 'Tools',
    group: MAKER,
    longest: 200,
    optional: true,
    hint: 'What crimps it and what opens it.',
  },
  {
    kind: 'number',
    key: 'voltageMax',
    column: 'voltage_max',
    label: 'Maximum voltage',
    group: LIMITS,
    unit: 'V',
    min: 50,
    max: 2000,
  },
  {
    kind: 'number',
    key: 'currentMax',
    column: 'current_max',
    label: 'Maximum current',
    group: LIMITS,
    unit: 'A',
    min: 1,
    max: 200,
  },
  {
    kind: 'number',
    key: 'temperatureMax',
    column: 'temperature_max',
    label: 'Maximum temperature',
    group: LIMITS,
    unit: '°C',
    min: 40,
    max: 150,
  },
];

export const CONNECTOR_DEFAULTS: Entry = { temperatureMax: 85, tool: '' };
