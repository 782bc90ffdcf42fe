import { readFileSync } from 'node:fs';
import { expect } from 'vitest';
import type { DiodeReference } from '../../src/domain/photovoltaics/module/diode-parameters';

/** A table of outside values: made with pvlib-python 0.15.2 (BSD-3) or by the arithmetic that each file names. */
interface Table<In, Out> {
  source: unknown;
  suggested_tolerance: unknown;
  n_cases: number;
  cases: { id: string; in: In; out: Out }[];
}

/** The cases of one table, complete. */
export function casesOf<In, Out>(name: string): { id: string; in: In; out: Out }[] {
  const table = JSON.parse(readFileSync(new URL(`${name}.json`, import.meta.url), 'utf8')) as Table<In, Out>;
  if (table.cases.length !== table.n_cases || table.n_cases === 0) {
    throw new Error(`${name}.json holds ${table.cases.length} cases of ${table.n_cases}`);
  }
  return table.cases;
}

/** Fails unless two values differ by no more than a share of the expected one (or by `floor` near zero). */
export function expectRelative(
  what: string,
  actual: number | null | undefined,
  expected: number | null,
  tolerance: number,
  floor = 1e-9,
): void {
  if (expected === null || actual === null || actual === undefined) {
    expect(actual, what).toBe(expected);
    return;
  }
  const allowed = Math.max(tolerance * Math.abs(expected), floor);
  expect(Math.abs(actual - expected), `${what}: ${actual} for ${expected}`).toBeLessThanOrEqual(allowed);
}

export function expectAbsolute(what: string, actual: number, expected: number, tolerance: number): void {
  expect(Math.abs(actual - expected), `${what}: ${actual} for ${expected}`).toBeLessThanOrEqual(tolerance);
}

interface PrintedModule {
  parameters: {
    alpha_sc: number;
    a_ref: number;
    I_L_ref: number;
    I_o_ref: number;
    R_sh_ref: number;
    R_s: number;
    EgRef: number;
    dEgdT: number;
  };
}

/** The made-up modules of a table, by name. */
export function modulesOf(name: string): Record<string, DiodeReference> {
  const { modules } = JSON.parse(readFileSync(new URL(`${name}.json`, import.meta.url), 'utf8')) as {
    modules: Record<string, Partial<PrintedModule> & Partial<PrintedModule['parameters']>>;
  };
  return Object.fromEntries(
    Object.entries(modules).map(([key, entry]) => {
      const p = (entry.parameters ?? entry) as PrintedModule['parameters'];
      return [
        key,
        {
          alphaIsc: p.alpha_sc,
          idealityVoltageRef: p.a_ref,
          photocurrentRef: p.I_L_ref,
          saturationCurrentRef: p.I_o_ref,
          resistanceShuntRef: p.R_sh_ref,
          resistanceSeries: p.R_s,
          bandGapRef: p.EgRef,
          bandGapSlope: p.dEgdT,
        },
      ];
    }),
  );
}

/** A module of a table that must be there. */
export function moduleNamed(modules: Record<string, DiodeReference>, name: string): DiodeReference {
  const module = modules[name];
  if (!module) throw new Error(`the table has no module ${name}`);
  return module;
}
