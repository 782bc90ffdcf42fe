import type {
  CATEGORIES,
  LIGHTS,
  TestFacts,
  TestPlan,
} from '../../domain/commissioning/shutdown-test-record';
import { roundsNeeded } from './round';

/** The plan as typed: every value is text, so that nothing typed is lost while it is wrong. */
export interface PlanForm {
  onSite: string;
  operator: string;
  others: string;
  strings: string[];
  /** Transmitters that are left out of the rounds. */
  without: string[];
  light: (typeof LIGHTS)[number];
  weather: string;
  withInstrument: boolean;
  name: string;
  serial: string;
  category: (typeof CATEGORIES)[number];
  ratedV: string;
  calibratedOn: string;
  provedBefore: boolean;
}
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
