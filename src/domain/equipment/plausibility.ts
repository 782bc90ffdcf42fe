import { plausibilitySaid as said } from '../../words/domain-equipment-plausibility';
import { CONNECTOR_DEFAULTS, CONNECTOR_FIELDS } from './connector-fields';
import type { Conflict, Doubt } from './doubt';
import type { EquipmentFamily } from './families';
import { numberOf, textOf, type Entry, type Field } from './fields';
import { withHeads } from './heads';
import { INVERTER_DEFAULTS, INVERTER_FIELDS } from './inverter-type';
import { MODULE_DEFAULTS, MODULE_FIELDS } from './module-fields';
import { moduleConflicts, moduleDoubts } from './module-plausibility';
import { UNIT_FIELDS, presetEntry } from './unit-fields';

export const FIELDS: Record<EquipmentFamily, readonly Field[]> = {
  modules: withHeads('modules', MODULE_FIELDS),
  units: withHeads('units', UNIT_FIELDS),
  connectors: withHeads('connectors', CONNECTOR_FIELDS),
  inverters: withHeads('inverters', INVERTER_FIELDS),
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
        message: said.lowestAboveNominal(min, nominal),
      }),
      ...when(nominal > max, {
        field: 'shutdownVoltageMax',
        message: said.highestBelowNominal(max, nominal),
      }),
      ...when(entry.kind !== 'shutdown_only' && entry.measures === 'none', {
        field: 'measures',
        message: said.measuresNothing,
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
        message: said.holds,
      }),
      ...when(entry.onCommandLoss === 'shuts_down' && n('commandLossAfterS') > 30, {
        key: 'slow',
        fields: ['commandLossAfterS'],
        message: said.slow(n('commandLossAfterS')),
      }),
      ...when(n('shutdownVoltageMax') > 1.2 || n('shutdownVoltageNominal') < 0.2, {
        key: 'shutdown_voltage',
        fields: ['shutdownVoltageNominal', 'shutdownVoltageMin', 'shutdownVoltageMax'],
        message: said.shutdownVoltage,
      }),
      ...when(n('bypassVoltage') > -0.1, {
        key: 'bypass_voltage',
        fields: ['bypassVoltage'],
        message: said.bypassVoltage,
      }),
      ...when(entry.outOfBox === 'passing' && entry.releasedBy === 'keep_alive', {
        key: 'passing_keep_alive',
        fields: ['outOfBox', 'releasedBy'],
        message: said.passingByKeepAlive,
      }),
      ...when(
        entry.kind === 'shutdown_only' && (entry.measures !== 'none' || entry.releasedBy === 'logger'),
        {
          key: 'silent_kind',
          fields: ['kind', 'measures', 'releasedBy'],
          message: said.silentKind,
        },
      ),
      ...when(n('powerMax') > held, {
        key: 'power',
        fields: ['powerMax'],
        message: said.power(Math.round(held)),
      }),
      ...when(entry.kind !== 'shutdown_only' && (n('voltageAccuracy') === 0 || n('voltageAccuracy') > 0.05), {
        key: 'accuracy',
        fields: ['voltageAccuracy'],
        message: said.accuracy,
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
      message: said.connectorScope,
    }),
};

const INVERTER_RULES: Rules = {
  conflicts: (entry) => {
    const n = (key: string) => numberOf(entry, key);
    return [
      ...when(n('mpptMin') >= n('mpptMax'), {
        field: 'mpptMax',
        message: said.windowBackwards(n('mpptMax'), n('mpptMin')),
      }),
      ...when(n('mpptMax') > n('voltageMax'), {
        field: 'mpptMax',
        message: said.windowAboveVoltage(n('mpptMax'), n('voltageMax')),
      }),
      ...when(n('currentMax') > n('iscMax'), {
        field: 'iscMax',
        message: said.shortCircuitBelow(n('iscMax'), n('currentMax')),
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
        message: said.reach((reach / 1000).toFixed(1)),
      }),
      ...when(n('mpptMax') < 1.5 * n('mpptMin'), {
        key: 'window',
        fields: ['mpptMin', 'mpptMax'],
        message: said.narrowWindow,
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
