import { designFindingSaid as said } from '../../../words/domain-photovoltaics-limits';

export const DESIGN_CHECKS = [
  'string_voltage_inverter',
  'string_voltage_building',
  'string_voltage_module',
  'string_voltage_unit',
  'mppt_window_hot',
  'mppt_window_cold',
  'unit_voltage_cold',
  'unit_current',
  'unit_power',
  'input_short_circuit',
  'input_operating_current',
  'series_fuse',
  'shutdown_inside_array',
  'shutdown_outside_array',
  'shutdown_time',
  'slots_without_unit',
  'mixed_units_in_string',
  'mixed_modules_in_string',
  'strings_per_input',
  'mixed_units_on_input',
  'shared_input_voltage',
  'shared_input_planes',
  'connector_module_unit',
  'connector_unit_unit',
] as const;
export type DesignCheck = (typeof DESIGN_CHECKS)[number];

export type DesignOutcome = 'exceeded' | 'cannot_tell' | 'within' | 'not_required';

export interface DesignFinding {
  check: DesignCheck;
  outcome: DesignOutcome;
  /** What the design has, in `unit`; null where it isn't defined. */
  value: number | null;
  /** What it is held against. */
  limit: number | null;
  unit: 'V' | 'A' | 'W' | 's' | '';
  /** Whether exceeding it is a matter of safety or of the maker's limits; otherwise of energy. */
  safety: boolean;
  /** What was found, one or two sentences. */
  words: string;
  /** Clause or document, and how well it is known. */
  clause: string;
  /** What to do; null where nothing has to be done. */
  remedy: string | null;
  /** Other ways out, and other readings of the figure. */
  alternatives: string[];
}

/** A figure in a sentence: thousands with a comma, a decimal where it counts, a real minus sign. */
export function figure(value: number, unit: string): string {
  const size = Math.abs(value);
  const digits = size < 20 && !Number.isInteger(Math.round(size * 100) / 100) ? (size < 2 ? 2 : 1) : 0;
  return said.figure(Number(value.toFixed(digits)), digits, unit); // ties as toFixed rounds them
}

interface Limit {
  check: DesignCheck;
  value: number;
  /** null: not entered. */
  limit: number | null;
  unit: DesignFinding['unit'];
  bound?: 'at_most' | 'at_least';
  safety?: boolean;
  clause: string;
  within: string;
  exceeded: string;
  /** What is missing, where `limit` is null. */
  missing?: string;
  remedy: string;
  alternatives?: string[];
  /**
   * Where the value rests on an estimated temperature: what it would be under conditions that certainly occur. Only if
   * that is beyond the limit too can more than "can't tell" be said.
   */
  certain?: number | undefined;
}

/** A value held against a limit. */
export function held(of: Limit): DesignFinding {
  const { check, value, limit, unit, clause, safety = true } = of;
  const shared = { check, value, limit, unit, safety, clause };
  if (limit === null)
    return {
      ...shared,
      value: null, // without a limit the figure only keeps apart strings of which the same is to be said
      outcome: 'cannot_tell',
      words: of.missing ?? said.noLimit,
      remedy: of.remedy,
      alternatives: [],
    };
  const holds = (figureHeld: number) => {
    const slack = 1e-9 * Math.abs(limit);
    return of.bound === 'at_least' ? figureHeld >= limit - slack : figureHeld <= limit + slack;
  };
  if (holds(value)) return { ...shared, outcome: 'within', words: of.within, remedy: null, alternatives: [] };
  if (of.certain !== undefined && holds(of.certain))
    return {
      ...shared,
      outcome: 'cannot_tell',
      words: said.onEstimate(of.exceeded),
      remedy: said.enterTemperatures,
      alternatives: [of.remedy, ...(of.alternatives ?? [])],
    };
  return {
    ...shared,
    outcome: 'exceeded',
    words: of.exceeded,
    remedy: of.remedy,
    alternatives: of.alternatives ?? [],
  };
}
