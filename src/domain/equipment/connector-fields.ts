import { connectorFieldTexts as texts } from '../../words/domain-equipment-fields';
import { NAME_FIELD, type Entry, type Field } from './fields';

export const CONNECTOR_FIELDS: readonly Field[] = [
  NAME_FIELD,
  {
    kind: 'text',
    key: 'maker',
    column: 'maker',
    ...texts.maker,
    longest: 80,
  },
  {
    kind: 'text',
    key: 'family',
    column: 'family',
    ...texts.family,
    longest: 80,
  },
  {
    kind: 'text',
    key: 'tool',
    column: 'tool',
    ...texts.tool,
    longest: 200,
    optional: true,
  },
  {
    kind: 'number',
    key: 'voltageMax',
    column: 'voltage_max',
    ...texts.voltageMax,
    unit: 'V',
    min: 50,
    max: 2000,
  },
  {
    kind: 'number',
    key: 'currentMax',
    column: 'current_max',
    ...texts.currentMax,
    unit: 'A',
    min: 1,
    max: 200,
  },
  {
    kind: 'number',
    key: 'temperatureMax',
    column: 'temperature_max',
    ...texts.temperatureMax,
    unit: '°C',
    min: 40,
    max: 150,
  },
];

export const CONNECTOR_DEFAULTS: Entry = { temperatureMax: 85, tool: '' };
