import { useEffect, useState, useSyncExternalStore, type FormEvent } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { CATEGORIES, LIGHTS, type TestPlan } from '../../domain/commissioning/shutdown-test-record';
import { localDay } from '../../drawings/times';
import type { ShutdownTestPage } from '../../schemas/api/shutdown-test';
import { readTyped, typedText, writeTyped } from './kept';
import { formOf, type PlanFaults, type PlanForm } from './plan-form';
import { roundName, roundsNeeded } from './round';
import { planStep } from '../../words/shutdown-test';

const LIGHT_WORDS = {
  bright: planStep.bright,
  dull: planStep.dull,
  snow: planStep.snowOnModules,
  night: planStep.night,
} as const;
const CATEGORY_WORDS = {
  'CAT IV': planStep.catIV,
  'CAT III': planStep.catIII,
  'CAT II': planStep.catII,
  none: planStep.noMark,
} as const;

const never = () => () => undefined;
/** What reads the plan is heavy: it comes after the page, and before anybody has typed one. */
const reader = () => import('./read-plan');

interface Props {
  page: ShutdownTestPage;
  plan: TestPlan | null;
  person: string;
  now: () => number;
  onPlanned: (plan: TestPlan) => void;
}

/** Step 1: who is there, what is tested, in which light, with which instrument. */
export function PlanStep({ page, plan, person, now, onPlanned }: Props) {
  const { facts } = page;
  const name = `plan.${page.id}`;
  // what was typed before a reload; on the server and at first paint nothing
  const before = useSyncExternalStore(
    never,
    () => typedText(name),
    () => null,
  );
  const [edited, setEdited] = useState<PlanForm | null>(null);
  const [tried, setTried] = useState(false);
  const blank = formOf(facts, plan ?? page.suggested, person);
  const form = edited ?? readTyped(before, blank) ?? blank;
  const [faults, setFaults] = useState<PlanFaults>({});
  useEffect(() => void reader(), []);
  const look = async (typed: PlanForm): Promise<TestPlan | null> => {
    const { readPlan } = await reader();
    const read = readPlan(facts, typed, localDay(now(), facts.site.timeZone));
    setFaults(read.faults);
    return read.plan;
  };
  const change = (some: Partial<PlanForm>) => {
    const next = { ...form, ...some };
    setEdited(next);
    writeTyped(name, next);
    if (tried) void look(next);
  };
  const fault = (field: string) => faults[field];
  const submit = async (event: FormEvent) => {
    event.preventDefault();
    const shown = event.currentTarget as HTMLElement;
    setTried(true);
    const read = await look(form);
    if (!read) {
      setTimeout(() => shown.querySelector<HTMLElement>('[aria-invalid]')?.focus());
      return;
    }
    writeTyped(name, null);
    onPlanned(read);
  };
  const needed = roundsNeeded(facts, form.strings);
  const text = (
    field: 'onSite' | 'operator' | 'others' | 'weather' | 'name' | 'serial' | 'ratedV' | 'calibratedOn',
  ) => ({
    name: field,
    value: form[field],
    onChange: (e: { target: { value: string } }) => change({ [field]: e.target.value }),
    error: fault(field),
    autoComplete: planStep.off,
  });
  return (
    <form onSubmit={(event) => void submit(event)} noValidate className="grid gap-5">
      <Sheet id="people" title={planStep.whoIsThere}>
        <div className="grid gap-4 sm:grid-cols-2">
          <Field label={planStep.personOnSite} hint={planStep.inChargeOfThe} {...text('onSite')} />
          <Field
            label={planStep.whoOperatesTheInitiator}
            hint={`${facts.initiator.name}${facts.initiator.place ? `, ${facts.initiator.place}` : ''}`}
            {...text('operator')}
          />
          <Field
            label={planStep.othersPresent}
            hint={planStep.witnessesTheCustomerMay}
            className="sm:col-span-2"
            {...text('others')}
          />
        </div>
      </Sheet>
      <Sheet
        id="what"
        title={planStep.whatIsTested(facts.zone.name)}
        aside={planStep.ofStrings(form.strings.length, facts.strings.length)}
      >
        <fieldset>
          <legend className="sr-only">{planStep.strings}</legend>
          <div className="grid grid-cols-3 gap-1 sm:grid-cols-5 lg:grid-cols-8">
            {facts.strings.map((s) => (
              <label key={s.id} className="flex min-h-[44px] items-center gap-2">
                <input
                  type="checkbox"
                  className="h-5 w-5 flex-none accent-petrol"
                  checked={form.strings.includes(s.id)}
                  onChange={(e) =>
                    change({
                      strings: e.target.checked
                        ? facts.strings.map((x) => x.id).filter((x) => x === s.id || form.strings.includes(x))
                        : form.strings.filter((x) => x !== s.id),
                    })
                  }
                />
                {s.name}
              </label>
            ))}
          </div>
          {fault('strings') && (
            <p role="alert" className="mt-1 text-sm font-medium text-rust-ink">
              {fault('strings')}
            </p>
          )}
        </fieldset>
        <h3 className="mt-4 font-medium">{planStep.rounds}</h3>
        <ol className="mt-1">
          {needed.map((r, i) => (
            <li key={r ?? 'initiator'} className="flex min-h-[44px] items-center gap-2">
              {r === null ? (
                <span>
                  {i + 1}. {roundName(facts, r)}
                </span>
              ) : (
                <label className="flex min-h-[44px] items-center gap-2">
                  <input
                    type="checkbox"
                    className="h-5 w-5 flex-none accent-petrol"
                    checked={!form.without.includes(r)}
                    onChange={(e) =>
                      change({
                        without: e.target.checked
                          ? form.without.filter((x) => x !== r)
                          : [...form.without, r],
                      })
                    }
                  />
                  {planStep.theOthersRunning(i, roundName(facts, r))}
                </label>
              )}
            </li>
          ))}
        </ol>
        {needed.length > 1 && <p className="text-sm text-ink-2">{planStep.aStringThatHears}</p>}
      </Sheet>
      <Sheet id="light" title={planStep.lightAndWeather}>
        <Segmented
          look="bold"
          label={planStep.lightOnTheModules}
          value={form.light}
          options={LIGHTS.map((value) => ({ value, label: LIGHT_WORDS[value] }))}
          onChange={(light) => change({ light })}
        />
        {(form.light === 'night' || form.light === 'snow') && (
          <p className="mt-2 text-rust-ink">{planStep.aDeadStringIn}</p>
        )}
        <Field
          label={planStep.weather}
          hint={planStep.clearCloudPassing12}
          className="mt-4"
          {...text('weather')}
        />
      </Sheet>
      <Sheet id="instrument" title={planStep.instrument}>
        <label className="mb-3 flex min-h-[44px] items-center gap-3">
          <input
            type="checkbox"
            className="h-5 w-5 flex-none accent-petrol"
            checked={form.withInstrument}
            onChange={(e) => change({ withInstrument: e.target.checked })}
          />
          {planStep.aRatedInstrumentIs}
        </label>
        {form.withInstrument ? (
          <div className="grid gap-4 sm:grid-cols-2">
            <Field label={planStep.makeAndModel} {...text('name')} />
            <Field label={planStep.serialNumber} {...text('serial')} />
            <div>
              <p className="mb-1 font-medium">{planStep.measurementCategoryAtIts}</p>
              <Segmented
                look="bold"
                label={planStep.measurementCategory}
                value={form.category}
                options={CATEGORIES.map((value) => ({ value, label: CATEGORY_WORDS[value] }))}
                onChange={(category) => change({ category })}
              />
            </div>
            <Field label={planStep.ratedVoltageOfThat} unit="V" inputMode="decimal" {...text('ratedV')} />
            <Field label={planStep.calibratedOn} type="date" {...text('calibratedOn')} />
            <label className="flex min-h-[44px] items-center gap-3 self-end">
              <input
                type="checkbox"
                className="h-5 w-5 flex-none accent-petrol"
                checked={form.provedBefore}
                onChange={(e) => change({ provedBefore: e.target.checked })}
              />
              {planStep.provedOnAKnown}
            </label>
          </div>
        ) : (
          <p className="text-ink-2">{planStep.withoutOneTheTest}</p>
        )}
      </Sheet>
      <div>
        {Object.keys(faults).length > 0 && (
          <p role="alert" className="mb-2 font-medium text-rust-ink">
            {Object.values(faults)[0]}
          </p>
        )}
        <Button type="submit" weight="primary" className="w-full sm:w-auto">
          {plan ? planStep.saveTheseChanges : planStep.saveAndReadThe}
        </Button>
      </div>
    </form>
  );
}
