import { voltageAtTemperature } from './string-sizing';
import { figure, type DesignFinding } from './design-finding';
import { modulesOf, type BuiltString } from './built-site';

/** Strings in parallel whose voltages at maximum power differ by more than this share pull each other down; own rule. */
const VOLTAGE_SPREAD = 0.02;
/** Degrees between planes from which parallel strings see the sun noticeably differently; own rule. */
const TILT_SPREAD = 5;
const AZIMUTH_SPREAD = 10;

const names = (strings: readonly BuiltString[]): string => strings.map((s) => s.name).join(', ');
const around = (a: number, b: number): number => {
  const gap = Math.abs(a - b) % 360;
  return Math.min(gap, 360 - gap);
};

/** Strings of one input held against each other and against what the input takes. One string alone has none of these. */
export function sharingFindings(parallel: readonly BuiltString[]): DesignFinding[] {
  const [first] = parallel;
  if (!first) return [];
  const findings: DesignFinding[] = [];
  const { inverter } = first;
  if (inverter && (parallel.length > 1 || inverter.stringsPerInput < 1)) {
    const fits = parallel.length <= inverter.stringsPerInput;
    findings.push({
      check: 'strings_per_input',
      outcome: fits ? 'within' : 'exceeded',
      value: parallel.length,
      limit: inverter.stringsPerInput,
      unit: '',
      safety: true,
      // what holds everywhere names no input, so that it is said once
      words: fits
        ? `${parallel.length} strings share an input; its type takes ${inverter.stringsPerInput}.`
        : `${first.input.name} has ${parallel.length} strings (${names(parallel)}); its type takes ${inverter.stringsPerInput}.`,
      clause: 'Inverter’s instructions',
      remedy: fits
        ? null
        : 'Spread the strings over more inputs, or join them in a combiner that the maker allows.',
      alternatives: [],
    });
  }
  if (parallel.length < 2) return findings;
  const kinds = new Set(parallel.map((s) => s.unit.kind));
  const types = [...new Set(parallel.map((s) => s.unit.name))];
  if (types.length > 1)
    findings.push({
      check: 'mixed_units_on_input',
      outcome: kinds.size > 1 ? 'exceeded' : 'cannot_tell',
      value: types.length,
      limit: 1,
      unit: '',
      safety: true,
      words:
        kinds.size > 1
          ? `${first.input.name} joins strings of different kinds of units (${types.join(', ')}): they are released and shut down differently, and while one string is held the other feeds its conductors.`
          : `${first.input.name} joins strings of different unit types of one kind (${types.join(', ')}).`,
      clause: 'Units’ instructions; common practice: one kind on an input',
      remedy:
        kinds.size > 1
          ? 'Give each kind an input of its own.'
          : 'Ask the makers whether their units may share an input.',
      alternatives: [],
    });
  if (kinds.has('optimizing')) return findings;
  findings.push(voltageSpread(parallel), ...planes(parallel));
  return findings;
}

function voltageSpread(parallel: readonly BuiltString[]): DesignFinding {
  const voltage = (string: BuiltString) =>
    modulesOf(string).reduce((v, { type, count }) => v + count * voltageAtTemperature(type.vmpRef, 0, 25), 0);
  const all = parallel.map(voltage);
  const [low, high] = [Math.min(...all), Math.max(...all)];
  const spread = high / low - 1;
  const fits = spread <= VOLTAGE_SPREAD;
  const counts = parallel.map((s) => `${s.name} ${s.slots.length}`).join(', ');
  return {
    check: 'shared_input_voltage',
    outcome: fits ? 'within' : 'exceeded',
    value: Math.round(1000 * spread) / 10,
    limit: 100 * VOLTAGE_SPREAD,
    unit: '',
    safety: false,
    words: fits
      ? `Strings of one input have voltages at maximum power within ${figure(100 * VOLTAGE_SPREAD, '%')} of each other.`
      : `The strings of ${parallel[0]?.input.name ?? 'the input'} share one voltage but would work at ${figure(Math.round(low), 'V')} to ${figure(Math.round(high), 'V')} (modules: ${counts}). The short one pulls the others down; it costs energy, and in poor light current can flow back.`,
    clause: 'Strings in parallel share one voltage; own rule: 2 %',
    remedy: fits ? null : 'Give strings of different length inputs of their own.',
    alternatives: [],
  };
}

function planes(parallel: readonly BuiltString[]): DesignFinding[] {
  const [first, ...others] = parallel;
  if (!first) return [];
  const different = others.filter(
    (s) =>
      Math.abs(s.plane.surfaceTilt - first.plane.surfaceTilt) > TILT_SPREAD ||
      (Math.max(s.plane.surfaceTilt, first.plane.surfaceTilt) > TILT_SPREAD &&
        around(s.plane.surfaceAzimuth, first.plane.surfaceAzimuth) > AZIMUTH_SPREAD),
  );
  if (different.length === 0) return [];
  const all = [...new Set(parallel.map((s) => s.plane.name))];
  return [
    {
      check: 'shared_input_planes',
      outcome: 'exceeded',
      value: all.length,
      limit: 1,
      unit: '',
      safety: false,
      words: `${first.input.name} joins strings of different planes (${all.join(', ')}): their currents add up under one tracker, and low output of one can’t be told from a cloud on the other. It costs little energy and is no hazard.`,
      clause: 'Own rule: 5° of tilt, 10° of azimuth',
      remedy: 'Give each plane inputs of its own where there are enough.',
      alternatives: [],
    },
  ];
}
