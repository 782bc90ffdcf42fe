import type { TestFacts, TestPlan } from '../../domain/commissioning/shutdown-test-record';
import { testPlan } from '../../schemas/api/shutdown-test';
import { typedNumber } from '../../schemas/typed-number';
import { shutdownTestPlanForm } from '../../words/shutdown-test';
import type { PlanFaults, PlanForm } from './plan-form';
import { roundsNeeded } from './round';

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
