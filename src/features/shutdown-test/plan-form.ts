import { z } from 'zod';
import {
  CATEGORIES,
  LIGHTS,
  type TestFacts,
  type TestPlan,
} from '../../domain/commissioning/shutdown-test-record';
import { testPlan } from '../../schemas/api/shutdown-test';
import { typedNumber } from '../../schemas/typed-number';
import { roundsNeeded } from './round';
import { shutdownTestPlanForm } from '../../words/shutdown-test';

/** The plan as typed: every value is text, so that nothing typed is lost while it is wrong. */
export const planForm = z.object({
  onSite: z.string(),
  operator: z.string(),
  others: z.string(),
  strings: z.array(z.string()),
  /** Transmitters that are left out of the rounds. */
  without: z.array(z.string()),
  light: z.enum(LIGHTS),
  weather: z.string(),
  withInstrument: z.boolean(),
  name: z.string(),
  serial: z.string(),
  category: z.enum(CATEGORIES),
  ratedV: z.string(),
  calibratedOn: z.string(),
  provedBefore: z.boolean(),
});
export type PlanForm = z.infer<typeof planForm>;
export type PlanFaults = Partial<Record<string, string>>;

/** The form for what is planned already, or for a new test of these strings. */
export function formOf(facts: TestFacts, plan: TestPlan | null, person: string): PlanForm {
  const here = new Set(facts.strings.map((s) => s.id));
  const strings = plan?.strings.filter((s) => here.has(s)) ?? facts.strings.map((s) => s.id);
  const needed = roundsNeeded(facts, strings);
  return {
    onSite: plan?.onSite ?? person,
    operator: plan?.operator ?? '',
    others: plan?.others ?? '',
    strings,
    without: plan ? needed.flatMap((r) => (r !== null && !plan.rounds.includes(r) ? [r] : [])) : [],
    light: plan?.light ?? 'bright',
    weather: plan?.weather ?? '',
    withInstrument: plan ? plan.instrument !== null : true,
    name: plan?.instrument?.name ?? '',
    serial: plan?.instrument?.serial ?? '',
    category: plan?.instrument?.category ?? 'CAT III',
    ratedV: plan?.instrument ? String(plan.instrument.ratedV) : '',
    calibratedOn: plan?.instrument?.calibratedOn ?? '',
    provedBefore: plan?.instrument?.provedBefore ?? false,
  };
}

/** The plan that a form stands for, or what is wrong with each field. `today` as year-month-day. */
export function readPlan(
  facts: TestFacts,
  form: PlanForm,
  today: string,
): { plan: TestPlan | null; faults: PlanFaults } {
  const faults: PlanFaults = {};
  const ratedV = form.withInstrument
    ? typedNumber(form.ratedV, shutdownTestPlanForm.ratedVoltage, { min: 50, max: 2000, unit: 'V' })
    : null;
  if (ratedV?.fault) faults.ratedV = ratedV.fault;
  const read = testPlan.safeParse({
    onSite: form.onSite,
    operator: form.operator,
    others: form.others,
    strings: form.strings,
    rounds: roundsNeeded(facts, form.strings).filter((r) => r === null || !form.without.includes(r)),
    light: form.light,
    weather: form.weather,
    instrument: form.withInstrument
      ? {
          name: form.name,
          serial: form.serial,
          category: form.category,
          ratedV: ratedV?.value ?? 1000,
          calibratedOn: form.calibratedOn,
          provedBefore: form.provedBefore,
        }
      : null,
  });
  if (!read.success)
    for (const issue of read.error.issues) {
      const field = String(issue.path.at(-1) ?? 'strings');
      faults[issue.path[0] === 'strings' ? 'strings' : field] ??= issue.message;
    }
  if (form.withInstrument && form.calibratedOn > today)
    faults.calibratedOn = shutdownTestPlanForm.thisDayIsStill;
  return { plan: read.success && Object.keys(faults).length === 0 ? read.data : null, faults };
}
