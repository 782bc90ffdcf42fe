import { inputDesignSaid as said } from '../../../words/domain-photovoltaics-inputs';
import { voltageAtTemperature } from './string-sizing';
import { figure, type DesignFinding } from './design-finding';
import { modulesOf, type BuiltString } from './built-site';

/** Strings in parallel whose voltages at maximum power differ by more than this share pull each other down; own rule. */
const VOLTAGE_SPREAD = 0.02;
/** Degrees between planes from which parallel strings see the sun noticeably differently; own rule. */
const TILT_SPREAD = 5;
const AZIMUTH_SPREAD = 10;

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
        ? said.stringsFit(parallel.length, inverter.stringsPerInput)
        : said.tooManyStrings(
            first.input.name,
            parallel.map((s) => s.name),
            inverter.stringsPerInput,
          ),
      clause: said.stringsClause,
      remedy: fits ? null : said.stringsRemedy,
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
        kinds.size > 1 ? said.mixedKinds(first.input.name, types) : said.mixedTypes(first.input.name, types),
      clause: said.mixedUnitsClause,
      remedy: kinds.size > 1 ? said.mixedKindsRemedy : said.mixedTypesRemedy,
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
  return {
    check: 'shared_input_voltage',
    outcome: fits ? 'within' : 'exceeded',
    value: Math.round(1000 * spread) / 10,
    limit: 100 * VOLTAGE_SPREAD,
    unit: '',
    safety: false,
    words: fits
      ? said.voltagesAlike(figure(100 * VOLTAGE_SPREAD, '%'))
      : said.voltagesDiffer(
          parallel[0]?.input.name ?? null,
          figure(Math.round(low), 'V'),
          figure(Math.round(high), 'V'),
          parallel.map((s) => ({ name: s.name, modules: s.slots.length })),
        ),
    clause: said.voltagesClause,
    remedy: fits ? null : said.voltagesRemedy,
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
      words: said.planesDiffer(first.input.name, all),
      clause: said.planesClause,
      remedy: said.planesRemedy,
      alternatives: [],
    },
  ];
}
