import { useState } from 'react';
import { readingAround } from '../../domain/commissioning/readings/around';
import type { ReadingStage } from '../../domain/commissioning/readings/stages';
import { STAGE_WORDS } from '../../words/domain-reading-stages';
import { interpretReading } from '../../domain/readings/interpret';
import type { ReadingLight } from '../../domain/readings/reading';
import { READING_CAUTION } from '../../domain/readings/words';
import { AnswerSheet } from '../../components/readings/AnswerSheet';
import { MeterInput, MeterPanel } from '../../components/readings/MeterPanel';
import { ReadAloud } from '../../components/readings/ReadAloud';
import { ReadingScale } from '../../components/readings/ReadingScale';
import { readForm } from '../../components/readings/form';
import { FIELD_AT, LIGHTS, METERS, PLACES, chosen } from '../../components/readings/form-choices';
import { HOW_TO_MEASURE, METER_LABELS, aloud, cautionParts } from '../../components/readings/words';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Fold } from '../../components/ui/Fold';
import { Segmented } from '../../components/ui/Segmented';
import { volts } from '../../drawings/numbers';
import { corrected } from '../../lib/capture-queue';
import { newRef } from '../../lib/capture-records';
import type { NewRecord } from '../../lib/capture-store';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { PhotoButton, WaitingPhotos } from './Photos';
import { RecordedReadings } from './RecordedReadings';
import { readingNow, readingRecord } from './records';
import { keepPhotos } from './save';
import type { ScreenProps } from './screen';
import {
  KIND_OF,
  forString,
  formOf,
  kindWords,
  placeAfter,
  stageOf,
  stringAfter,
  typedPlaces,
  typesOf,
  viewChange,
  type CaptureView,
} from './view';
import { readingScreen } from '../../words/capture';
import { capital } from '../../words/domain-counts';

interface Moment {
  stage: ReadingStage;
  light: ReadingLight;
  /** ISO 8601 */
  at: string;
}

/** What is typed, with what else was read at this string and its neighbours in the same light, and what it means. */
function meaning(site: CaptureSnapshot, string: CaptureString, view: CaptureView, moment: Moment) {
  const { unitType, module } = typesOf(site, string);
  if (!unitType || !module) return null;
  const form = formOf(view, string, unitType.kind, moment.stage);
  const around = readingAround(site, string.id, { ...moment, kind: 'positive_to_negative' });
  const between = string.readings.find(
    (r) => r.stage === moment.stage && r.kind === 'positive_to_negative' && r.light === moment.light,
  );
  const text = (typed: string, kept: number | null | undefined): string =>
    typed.trim() !== '' || kept == null ? typed : String(kept);
  const whole = {
    ...form,
    v: text(form.v, between?.voltage),
    pe: text(form.pe, around.own.positive),
    ne: text(form.ne, around.own.negative),
  };
  const known = { units: string.units, unitType, module, siblings: around.siblings };
  const read = readForm(typedPlaces(view).length === 0 ? form : whole, known);
  return { form, around, ...read, answer: read.question && interpretReading(read.question) };
}

/** The meter's screen of one string: what is typed, what it means, and on to the next with one tap. */
export function ReadingScreen({ phone, state, site, string, view, change, clock, say }: ScreenProps) {
  const { unitType, module } = typesOf(site, string);
  const { stage, stages } = stageOf(view, unitType ?? { kind: 'shutdown_only', releasedBy: 'keep_alive' });
  const place = chosen(PLACES, view.at, 'between');
  const [fault, setFault] = useState('');
  const [saving, setSaving] = useState(false);
  const meter = chosen(METERS, view.meter, 'high_impedance');
  const light = chosen(LIGHTS, view.light, 'bright');

  const read = unitType && module && meaning(site, string, view, { stage, light, at: clock.toISOString() });
  if (!unitType || !module || !read) return <p>{readingScreen.theTypesOfThis}</p>;
  const { form, faults, question, waiting, answer } = read;
  const next = stringAfter(site.strings, string.id);
  const places = typedPlaces(view);
  const cautions = answer?.cautions ?? [READING_CAUTION];
  const fixed = state.records.find((r) => r.ref === view.fix && r.kind === 'reading') ?? null;

  const facts = (of: (typeof places)[number], voltage: number) => ({
    stage,
    kind: KIND_OF[of],
    light,
    meterMode: meter,
    commanded: chosen(['released', 'shutdown', 'unknown'] as const, form.commanded, 'unknown'),
    voltage,
    note: '',
  });
  const save = async () => {
    const values = places.map((of) => ({
      of,
      read: readForm({ ...form, v: form[FIELD_AT[of]] ?? '', pe: '', ne: '' }),
    }));
    const made: NewRecord[] = [];
    for (const [i, { of, read: one }] of values.entries()) {
      if (!one.question) {
        change({ at: of });
        setFault(`${kindWords(of)}: ${Object.values(one.faults)[0] ?? readingScreen.typeWhatTheMeter}`);
        return;
      }
      const given = facts(of, one.question.voltageV);
      const ref = i === 0 && view.draft ? view.draft : newRef();
      const before = readingNow(string, stage, given.kind);
      made.push(
        readingRecord(
          { snapshot: site, string, ref, at: new Date().toISOString() },
          given,
          before?.ref ?? null,
        ),
      );
    }
    setSaving(true);
    try {
      if (fixed && made.length === 1) {
        const { ref, supersedes } = fixed.body as { ref: string; supersedes: string | null };
        const body = { ...made[0]!.body, ref, supersedes };
        await phone?.change([corrected(fixed, body, made[0]!.label)]);
      } else await phone?.add(made);
      setFault('');
      say(readingScreen.keptMap(made.map((r) => r.label).join('; ')));
      change(
        next && !fixed
          ? forString(view, next.id)
          : { ...forString(view, ''), part: fixed ? 'waiting' : 'readings' },
      );
    } catch (error) {
      setFault(error instanceof Error ? error.message : readingScreen.itCouldNotBe);
    } finally {
      setSaving(false);
    }
  };
  const photograph = async (files: File[]) => {
    const draft = view.draft || newRef();
    if (!view.draft) change({ draft }, 'typed');
    try {
      const left =
        phone &&
        (await keepPhotos(files, {
          phone,
          snapshot: site,
          string,
          subject: 'meter_reading',
          subjectRef: draft,
          of: readingScreen.meterPlace(kindWords(place)),
        }));
      setFault(left ?? '');
    } catch (error) {
      setFault(error instanceof Error ? error.message : readingScreen.thePhotoCouldNot);
    }
  };
  const photos = state.records.filter(
    (r) => r.kind === 'photo' && r.body.subjectRef === view.draft && view.draft !== '',
  );

  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        void save();
      }}
    >
      <h1 tabIndex={-1} className="text-[30px] leading-9 tracking-[-0.03em] outline-none">
        {readingScreen.whatDoesTheMeter}
      </h1>
      <p className="mb-2 mt-0.5 text-[16px] leading-[22px] text-ink-2">{HOW_TO_MEASURE[place]}</p>
      <Fold
        title={readingScreen.ofTheMeter(capital(STAGE_WORDS[stage]), METER_LABELS[meter])}
        opens={readingScreen.change}
        className="mb-3"
      >
        <div className="space-y-2 pb-3">
          <Segmented
            look="bold"
            name="stage"
            label={readingScreen.stage}
            value={stage}
            options={stages.map((value) => ({ value, label: STAGE_WORDS[value] }))}
            onChange={(value: ReadingStage) => change({ stage: value, commanded: '' })}
          />
          <MeterInput value={view.meter} onChange={(value) => change({ meter: value })} />
        </div>
      </Fold>
      <div>
        <MeterPanel
          key={`${string.id} ${place}`}
          form={form}
          faults={faults}
          place={place}
          then={placeAfter(place)}
          asks={{ heard: false, meter: false }}
          typed={(some) => change(viewChange(some), 'typed')}
          choose={(some) => change(viewChange(some))}
        />
      </div>
      <div className="mt-4 space-y-4">
        <AnswerSheet answer={answer} question={question} waiting={waiting} faults={faults} />
        {answer && read.around.siblings.length > 0 && (
          <p className="text-sm text-ink-2">
            {readingScreen.otherStringsUsedRead(
              read.around.siblings.map((s) => `${s.name} ${volts(s.voltageV)}`).join(', '),
            )}
          </p>
        )}
        {unitType.kind !== 'shutdown_only' && (
          <p className="text-sm text-ink-2">{readingScreen.ofUnitsHadAnswered(string.heard, string.units)}</p>
        )}
        {answer && question && <ReadingScale answer={answer} question={question} />}
        <RecordedReadings site={site} string={string} stage={stage} change={change} />
        {cautions.map((caution) => {
          const { strong, rest } = cautionParts(caution);
          return (
            <Caution key={caution} strong={strong}>
              {rest}
            </Caution>
          );
        })}
        {answer && question && <ReadAloud text={aloud(answer, question)} link={false} />}
        <WaitingPhotos phone={phone} photos={photos} progress={state.progress} />
      </div>
      <div className="sticky bottom-0 z-10 -mx-4 mt-4 border-t border-rule bg-film px-4 py-2">
        {fault && (
          <p role="alert" className="mb-2 font-medium text-rust-ink">
            {fault}
          </p>
        )}
        <div className="flex gap-2.5">
          <Button
            type="submit"
            weight="primary"
            className="min-h-[52px] flex-1"
            disabled={places.length === 0 || saving || !phone}
          >
            {fixed
              ? readingScreen.saveTheCorrection
              : next
                ? readingScreen.saveAndGoTo(next.name)
                : readingScreen.saveAndGoToThe}
          </Button>
          <PhotoButton
            label={photos.length > 0 ? readingScreen.photoPhotos(photos.length) : readingScreen.photo}
            onTaken={(f) => void photograph(f)}
          />
        </div>
      </div>
    </form>
  );
}
