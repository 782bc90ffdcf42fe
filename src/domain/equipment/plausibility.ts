import { CONNECTOR_DEFAULTS, CONNECTOR_FIELDS } from './connector-fields';
import type { Conflict, Doubt } from './doubt';
import type { EquipmentFamily } from './families';
import { numberOf, textOf, type Entry, type Field } from './fields';
import { INVERTER_DEFAULTS, INVERTER_FIELDS } from './inverter-type';
import { MODULE_DEFAULTS, MODULE_FIELDS } from './module-fields';
import { moduleConflicts, moduleDoubts } from './module-plausibility';
import { UNIT_FIELDS, presetEntry } from './unit-fields';

export const FIELDS: Record<EquipmentFamily, readonly Field[]> = {
  modules: MODULE_FIELDS,
  units: UNIT_FIELDS,
  connectors: CONNECTOR_FIELDS,
  inverters: INVERTER_FIELDS,
};

/** What a new entry of a family begins with. */
export const DEFAULTS: Record<EquipmentFamily, Entry> = {
  modules: MODULE_DEFAULTS,
  units: presetEntry('monitored'),
  connectors: CONNECTOR_DEFAULTS,
  inverters: INVERTER_DEFAULTS,
};

interface Rules {
  conflicts: (entry: Entry) => Conflict[];
  doubts: (entry: Entry) => Doubt[];
}

const when = <T>(condition: boolean, value: T): T[] => (condition ? [value] : []);

const UNIT_RULES: Rules = {
  conflicts: (entry) => {
    const [min, nominal, max] = ['Min', 'Nominal', 'Max'].map((k) =>
      numberOf(entry, `shutdownVoltage${k}`),
    ) as [number, number, number];
    return [
      ...when(min > nominal, {
        field: 'shutdownVoltageMin',
        message: `The lowest shutdown voltage (${min} V) is above the shutdown voltage (${nominal} V). Lower it.`,
      }),
      ...when(nominal > max, {
        field: 'shutdownVoltageMax',
        message: `The highest shutdown voltage (${max} V) is below the shutdown voltage (${nominal} V). Raise it.`,
      }),
      ...when(entry.kind !== 'shutdown_only' && entry.measures === 'none', {
        field: 'measures',
        message: 'A unit of this kind reports what it measures. Choose a side, or the kind "Shutdown only".',
      }),
    ];
  },
  doubts: (entry) => {
    const n = (key: string) => numberOf(entry, key);
    const held = n('voltageInMax') * n('currentMax');
    return [
      ...when(entry.onCommandLoss === 'holds', {
        key: 'holds',
        fields: ['onCommandLoss'],
        message:
          'A unit that holds its state does not shut down when its command or keep-alive stops: design checks will say so.',
      }),
      ...when(entry.onCommandLoss === 'shuts_down' && n('commandLossAfterS') > 30, {
        key: 'slow',
        fields: ['commandLossAfterS'],
        message: `${n('commandLossAfterS')} s is longer than the 30 s of NEC 690.12(B).`,
      }),
      ...when(n('shutdownVoltageMax') > 1.2 || n('shutdownVoltageNominal') < 0.2, {
        key: 'shutdown_voltage',
        fields: ['shutdownVoltageNominal', 'shutdownVoltageMin', 'shutdownVoltageMax'],
        message: 'Common practice is 0.6 V a unit. Check that volts were typed, for one unit, open circuit.',
      }),
      ...when(n('bypassVoltage') > -0.1, {
        key: 'bypass_voltage',
        fields: ['bypassVoltage'],
        message: 'A bypass path usually drops 0.3 to 0.7 V (−0.3 to −0.7 V here, from experience).',
      }),
      ...when(entry.outOfBox === 'passing' && entry.releasedBy === 'keep_alive', {
        key: 'passing_keep_alive',
        fields: ['outOfBox', 'releasedBy'],
        message: 'Units released by a keep-alive usually leave the box in shutdown. Check the maker’s sheet.',
      }),
      ...when(
        entry.kind === 'shutdown_only' && (entry.measures !== 'none' || entry.releasedBy === 'logger'),
        {
          key: 'silent_kind',
          fields: ['kind', 'measures', 'releasedBy'],
          message: 'Units of the kind "Shutdown only" report nothing and hear no logger.',
        },
      ),
      ...when(n('powerMax') > held, {
        key: 'power',
        fields: ['powerMax'],
        message: `Maximum voltage times maximum current is ${Math.round(held)} W: the power can’t be reached.`,
      }),
      ...when(entry.kind !== 'shutdown_only' && (n('voltageAccuracy') === 0 || n('voltageAccuracy') > 0.05), {
        key: 'accuracy',
        fields: ['voltageAccuracy'],
        message: 'Units usually measure within 0.5 to 3 %. Findings rest on this figure.',
      }),
    ];
  },
};

const CONNECTOR_RULES: Rules = {
  conflicts: () => [],
  doubts: (entry) =>
    when(numberOf(entry, 'voltageMax') > 1500 || numberOf(entry, 'currentMax') > 125, {
      key: 'scope',
      fields: ['voltageMax', 'currentMax'],
      message: 'IEC 62852 covers connectors up to 1500 V and 125 A: check the sheet.', // from its scope
    }),
};

const INVERTER_RULES: Rules = {
  conflicts: (entry) => {
    const n = (key: string) => numberOf(entry, key);
    return [
      ...when(n('mpptMin') >= n('mpptMax'), {
        field: 'mpptMax',
        message: `The window ends at ${n('mpptMax')} V and begins at ${n('mpptMin')} V. Its end must be above its beginning.`,
      }),
      ...when(n('mpptMax') > n('voltageMax'), {
        field: 'mpptMax',
        message: `The window ends at ${n('mpptMax')} V, above the maximum DC voltage of ${n('voltageMax')} V.`,
      }),
      ...when(n('currentMax') > n('iscMax'), {
        field: 'iscMax',
        message: `The maximum short-circuit current (${n('iscMax')} A) is below the operating current (${n('currentMax')} A). Check which is which.`,
      }),
    ];
  },
  doubts: (entry) => {
    const n = (key: string) => numberOf(entry, key);
    const reach = n('inputs') * n('currentMax') * n('mpptMax');
    return [
      ...when(reach < n('acPowerMax'), {
        key: 'reach',
        fields: ['acPowerMax', 'inputs', 'currentMax'],
        message: `All inputs at the top of the window take ${(reach / 1000).toFixed(1)} kW, less than the AC power. Check kW, and whether the current is of one input.`,
      }),
      ...when(n('mpptMax') < 1.5 * n('mpptMin'), {
        key: 'window',
        fields: ['mpptMin', 'mpptMax'],
        message: 'The window is unusually narrow: full-power range and whole range are two lines of a sheet.',
      }),
    ];
  },
};

const RULES: Record<EquipmentFamily, Rules> = {
  modules: { conflicts: moduleConflicts, doubts: moduleDoubts },
  units: UNIT_RULES,
  connectors: CONNECTOR_RULES,
  inverters: INVERTER_RULES,
};

/**
 * What can't be and what is unusual about a whole entry whose fields each lie in their ranges. Doubts are only looked
 * for where nothing contradicts. Orders of magnitude are from experience where no source is named.
 */
export function judgeEntry(
  family: EquipmentFamily,
  entry: Entry,
): { conflicts: Conflict[]; doubts: Doubt[] } {
  textOf(entry, 'name');
  const conflicts = RULES[family].conflicts(entry);
  return { conflicts, doubts: conflicts.length > 0 ? [] : RULES[family].doubts(entry) };
}
