import type { DesignCheck, DesignOutcome } from '../domain/photovoltaics/limits/design-finding';
import { countAtStart, counted } from '../drawings/numbers';
import type { SiteDesign, SiteDesignItem } from '../schemas/api/design';

export const CHECK_WORDS: Record<DesignCheck, string> = {
  string_voltage_inverter: 'Coldest-day voltage, inverter',
  string_voltage_building: 'Coldest-day voltage, building',
  string_voltage_module: 'Coldest-day voltage, modules',
  string_voltage_unit: 'Coldest-day voltage, units',
  mppt_window_hot: 'Window, hottest day',
  mppt_window_cold: 'Window, coldest day',
  unit_voltage_cold: 'One module on its unit, voltage',
  unit_current: 'One module on its unit, current',
  unit_power: 'One module on its unit, power',
  input_short_circuit: 'Input, short-circuit current',
  input_operating_current: 'Input, operating current',
  series_fuse: 'String fuse',
  shutdown_inside_array: 'After shutdown, inside the array',
  shutdown_outside_array: 'After shutdown, home run',
  shutdown_time: 'After shutdown, time',
  slots_without_unit: 'Slots without a unit',
  mixed_units_in_string: 'Unit types in one string',
  mixed_modules_in_string: 'Module types in one string',
  strings_per_input: 'Strings on one input',
  mixed_units_on_input: 'Unit kinds on one input',
  shared_input_voltage: 'Strings that share an input, voltage',
  shared_input_planes: 'Strings that share an input, planes',
  connector_module_unit: 'Connectors, module on unit',
  connector_unit_unit: 'Connectors, unit on unit',
};

export const OUTCOME_WORDS: Record<DesignOutcome, string> = {
  exceeded: 'Exceeded',
  cannot_tell: 'Can’t tell',
  within: 'Within',
  not_required: 'Not required',
};

/** "A1 to A8, B3": consecutive names of one letter drawn together. */
export function stringsInShort(strings: readonly { name: string }[]): string {
  const parts: string[] = [];
  let run: { prefix: string; from: number; to: number } | null = null;
  const close = () => {
    if (!run) return;
    const { prefix, from, to } = run;
    if (to - from >= 2) parts.push(`${prefix}${from} to ${prefix}${to}`);
    else for (let n = from; n <= to; n++) parts.push(`${prefix}${n}`);
    run = null;
  };
  for (const { name } of strings) {
    const read = /^(.*?)([1-9]\d*)$/.exec(name);
    const [prefix, n] = [read?.[1] ?? '', Number(read?.[2])];
    if (read && run && run.prefix === prefix && n === run.to + 1) run.to = n;
    else {
      close();
      if (read) run = { prefix, from: n, to: n };
      else parts.push(name);
    }
  }
  close();
  return parts.join(', ');
}

const stringsOf = (findings: readonly SiteDesignItem[]): number =>
  new Set(findings.flatMap((f) => f.strings.map((s) => s.id))).size;

/** The page's heading: what is exceeded, or that nothing is. */
export function designFinding(design: SiteDesign): { heading: string; sentence: string } {
  const exceeded = design.findings.filter((f) => f.outcome === 'exceeded');
  const open = design.findings.filter((f) => f.outcome === 'cannot_tell');
  const grave = exceeded.filter((f) => f.safety);
  const never = 'Arithmetic over what is entered, never an approval: local code and licensed people decide.';
  const untold = open.length > 0 ? `${countAtStart(open.length)} more can’t be told yet. ` : '';
  if (design.strings === 0)
    return {
      heading: 'No string to check yet',
      sentence: 'Draw the strings in the as-built; each is then checked at once.',
    };
  if (grave.length > 0)
    return {
      heading: `${countAtStart(stringsOf(grave))} of ${counted(design.strings, 'string')} ${stringsOf(grave) === 1 ? 'is' : 'are'} beyond a limit`,
      sentence: `${untold}Change the design or the entry before anything is energised. ${never}`,
    };
  if (exceeded.length > 0)
    return {
      heading: `No limit of safety is exceeded; ${counted(stringsOf(exceeded), 'string')} may lose energy`,
      sentence: `${untold}${never}`,
    };
  return {
    heading:
      open.length > 0
        ? `Nothing is exceeded; ${counted(open.length, 'point')} can’t be told`
        : `${counted(design.strings, 'string')} stay${design.strings === 1 ? 's' : ''} within every limit`,
    sentence: `${open.length > 0 ? 'Enter what is missing, and the checks follow at once. ' : ''}${never}`,
  };
}

const SHUTDOWN: readonly DesignCheck[] = [
  'slots_without_unit',
  'shutdown_inside_array',
  'shutdown_outside_array',
  'shutdown_time',
  'mixed_units_on_input',
];
/** Strings that may not shut down as they should, by what is entered. */
export const mayNotShutDown = (design: SiteDesign): { name: string }[] => {
  const found = new Map<string, { name: string }>();
  for (const f of design.findings)
    if (f.outcome === 'exceeded' && SHUTDOWN.includes(f.check)) for (const s of f.strings) found.set(s.id, s);
  const byName = new Intl.Collator('en', { numeric: true });
  return [...found.values()].sort((a, b) => byName.compare(a.name, b.name));
};
