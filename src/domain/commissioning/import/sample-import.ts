import type { KnownNames } from './table';

/** A small site for tests and examples: two strings of three, one more input free. */
export const SAMPLE_NAMES: KnownNames = {
  strings: [
    {
      name: 'A1',
      slots: 3,
      plane: 'South roof',
      inverter: 'Inverter 1',
      input: 1,
      zone: 'Whole roof',
      unitType: 'Watcher 15',
      kind: 'monitored',
      logger: 'LG-0001',
      transmitters: [],
    },
    {
      name: 'A2',
      slots: 3,
      plane: 'South roof',
      inverter: 'Inverter 1',
      input: 2,
      zone: 'Whole roof',
      unitType: 'Watcher 15',
      kind: 'monitored',
      logger: 'LG-0001',
      transmitters: [],
    },
  ],
  planes: ['South roof', 'East roof'],
  inputs: [
    { inverter: 'Inverter 1', number: 1 },
    { inverter: 'Inverter 1', number: 2 },
    { inverter: 'Inverter 1', number: 3 },
  ],
  zones: ['Whole roof'],
  loggers: ['LG-0001'],
  transmitters: ['Sender 1'],
  unitTypes: [
    { name: 'Watcher 15', kind: 'monitored' },
    { name: 'Plain 20', kind: 'shutdown_only' },
  ],
  moduleTypes: ['Slate 420', 'Slate 430'],
};
