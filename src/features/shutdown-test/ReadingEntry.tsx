import { useEffect, useId, useState, type FormEvent } from 'react';
import { pressed } from '../../components/readings/form';
import { NumberPad } from '../../components/readings/NumberPad';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Segmented } from '../../components/ui/Segmented';
import type { Act, Voltages } from '../../domain/commissioning/shutdown-test-record';
import { typedNumber } from '../../schemas/typed-number';
import type { StringNow } from './round';
import { readingEntry } from '../../words/shutdown-test';

const PLACES = [
  { key: 'positiveToNegativeV', label: readingEntry.to },
  { key: 'positiveToEarthV', label: readingEntry.toEarth },
  { key: 'negativeToEarthV', label: readingEntry.toEarth2 },
] as const satisfies readonly { key: keyof Voltages; label: string }[];
type Place = (typeof PLACES)[number]['key'];
const EMPTY: Record<Place, string> = { positiveToNegativeV: '', positiveToEarthV: '', negativeToEarthV: '' };
const VOLTS = { min: -2000, max: 2000, unit: 'V' } as const;

interface Props {
  string: StringNow;
  round: number;
  moment: 'before' | 'after';
  timeLimitS: number;
  /** Seconds since the command by the page's clock; null before it. */
  clockS: () => number | null;
  onSave: (act: Extract<Act, { kind: 'reading' }>) => void;
  onClose: () => void;
}

/** What the instrument shows at the inverter's end of one home run: three voltages and when. */
export function ReadingEntry({ string, round, moment, timeLimitS, clockS, onSave, onClose }: Props) {
  const [text, setText] = useState(EMPTY);
  const [place, setPlace] = useState<Place>('positiveToNegativeV');
  const [seconds, setSeconds] = useState<{ text: string; from: 'clock' | 'typed' }>({
    text: '',
    from: 'clock',
  });
  const [end, setEnd] = useState<'inverter' | 'elsewhere'>('inverter');
  const [faults, setFaults] = useState<Partial<Record<Place | 'afterS' | 'all', string>>>({});
  const id = useId();
  const [sinceS, setSinceS] = useState(clockS);
  useEffect(() => {
    const timer = setInterval(() => setSinceS(clockS()), 500);
    return () => clearInterval(timer);
  }, [clockS]);
  const typed = (value: string) => {
    setText({ ...text, [place]: value });
    // the first key stamps the reading: nobody can type three numbers in no time
    if (moment === 'after' && seconds.text === '' && value !== '')
      setSeconds({ text: String(Math.ceil(clockS() ?? 0)), from: 'clock' });
  };
  const submit = (event?: FormEvent) => {
    event?.preventDefault();
    const found: typeof faults = {};
    const voltages: Voltages = { positiveToNegativeV: null, positiveToEarthV: null, negativeToEarthV: null };
    for (const { key, label } of PLACES) {
      if (text[key].trim() === '') continue;
      const read = typedNumber(text[key], label, VOLTS);
      if (read.fault) found[key] = read.fault;
      voltages[key] = read.value;
    }
    const after =
      moment === 'after'
        ? typedNumber(seconds.text, readingEntry.secondsAfterTheCommand, { min: 0, max: 7200, unit: 's' })
        : null;
    if (after?.fault) found.afterS = after.fault;
    if (Object.values(voltages).every((v) => v === null) && Object.keys(found).length === 0)
      found.all = readingEntry.typeAtLeastOne;
    setFaults(found);
    if (Object.keys(found).length > 0) return;
    onSave({
      kind: 'reading',
      round,
      string: string.part.id,
      moment,
      afterS: after?.value ?? null,
      secondsFrom: seconds.from,
      atInverterEnd: end === 'inverter',
      voltages,
      note: '',
    });
  };
  const next = () => {
    const after = PLACES[PLACES.findIndex((p) => p.key === place) + 1];
    if (after) setPlace(after.key);
    else submit();
  };
  const first = Object.values(faults)[0];
  return (
    <form onSubmit={submit} noValidate className="space-y-3">
      {sinceS !== null && (
        <p className="text-[17px] font-semibold tabular-nums" role="timer">
          {readingEntry.sinceTheCommand(Math.floor(sinceS))}
        </p>
      )}
      <p className="text-ink-2">
        {moment === 'before'
          ? readingEntry.beforeTheCommandTo
          : readingEntry.atMostMayStand(string.limitV, timeLimitS)}
      </p>
      <fieldset className="grid gap-1.5">
        <legend className="sr-only">{readingEntry.voltagesOf(string.part.name)}</legend>
        {PLACES.map(({ key, label }) => {
          const value = typedNumber(text[key], label, VOLTS).value;
          const over = moment === 'after' && value !== null && Math.abs(value) > string.limitV;
          return (
            <div
              key={key}
              className={`flex flex-wrap items-center gap-x-2 border-b-[3px] pb-1 ${key === place ? 'border-ink' : 'border-rule'}`}
            >
              <label htmlFor={`${id}-${key}`} className="w-[84px] flex-none font-medium">
                {label}
              </label>
              <button
                type="button"
                aria-label={readingEntry.changeTheSignOf(label)}
                onClick={() => {
                  setPlace(key);
                  setText({ ...text, [key]: pressed(text[key], 'sign') });
                }}
                className="h-[44px] w-[44px] flex-none rounded border border-rule bg-sheet text-xl"
              >
                ±
              </button>
              <input
                id={`${id}-${key}`}
                value={text[key]}
                inputMode="decimal"
                autoComplete="off"
                maxLength={12}
                placeholder="0.0"
                aria-invalid={faults[key] ? true : undefined}
                aria-describedby={`${id}-word-${key}`}
                onFocus={() => setPlace(key)}
                onChange={(e) => {
                  setPlace(key);
                  setText({ ...text, [key]: e.target.value });
                  if (moment === 'after' && seconds.text === '' && e.target.value !== '')
                    setSeconds({ text: String(Math.ceil(clockS() ?? 0)), from: 'clock' });
                }}
                className="min-h-[48px] w-0 min-w-[90px] flex-1 bg-transparent text-right text-[32px] font-semibold leading-[40px] tracking-[-0.03em] placeholder:text-rule"
              />
              <span aria-hidden="true" className="text-[20px] text-ink-2">
                V
              </span>
              <span
                id={`${id}-word-${key}`}
                className={`min-w-full text-right text-sm empty:hidden ${over ? 'font-semibold text-ink' : 'text-ink-2'}`}
              >
                {moment === 'before' || value === null
                  ? ''
                  : over
                    ? readingEntry.overLimitVV(string.limitV)
                    : readingEntry.withinLimitVV(string.limitV)}
              </span>
            </div>
          );
        })}
      </fieldset>
      {moment === 'after' && (
        <Field
          label={readingEntry.readSoLongAfter}
          unit="s"
          inputMode="decimal"
          autoComplete="off"
          className="max-w-[260px]"
          value={seconds.text}
          error={faults.afterS}
          hint={
            seconds.text === ''
              ? readingEntry.notedAtTheFirst
              : readingEntry.fromNTheTimeLimitS(
                  seconds.from,
                  Number(seconds.text.replace(',', '.')),
                  timeLimitS,
                )
          }
          onChange={(e) => setSeconds({ text: e.target.value, from: 'typed' })}
        />
      )}
      <Segmented
        look="bold"
        label={readingEntry.whereItWasRead}
        name={`${id}-end`}
        value={end}
        options={[
          { value: 'inverter', label: readingEntry.atTheInvertersEnd },
          { value: 'elsewhere', label: readingEntry.elsewhere },
        ]}
        onChange={setEnd}
      />
      {end === 'elsewhere' && <p className="text-sm text-ink-2">{readingEntry.keptButOnlyThe}</p>}
      <NumberPad
        onKey={(k) => typed(pressed(text[place], k))}
        onDone={next}
        doneWords={place === 'negativeToEarthV' ? readingEntry.save : readingEntry.next}
      />
      {first && (
        <p role="alert" className="font-medium text-rust-ink">
          {first}
        </p>
      )}
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" className="flex-1">
          {readingEntry.saveThisReading}
        </Button>
        <Button onClick={onClose}>{readingEntry.cancel}</Button>
      </div>
    </form>
  );
}
