import { Suspense, useEffect, useMemo } from 'react';
import { interpretReading } from '../../domain/readings/interpret';
import { READING_CAUTION } from '../../domain/readings/words';
import { Caution } from '../../components/ui/Caution';
import { late } from '../../lib/late';
import { later } from '../../lib/later';
import { useViewInUrl } from '../../lib/view-in-url';
import { AnswerSheet } from '../../components/readings/AnswerSheet';
import { KnownMore } from './KnownMore';
import { MeterPanel } from '../../components/readings/MeterPanel';
import { ReadingScale } from '../../components/readings/ReadingScale';
import { StringPanel } from './StringPanel';
import { readForm } from '../../components/readings/form';
import { DEFAULTS, PLACES, chosen, type ReadingForm } from '../../components/readings/form-choices';
import { HOW_TO_MEASURE, aloud, cautionParts, titleOf } from '../../components/readings/words';
import { tryReading } from '../../words/readings';

const Scale = later(
  async () => (await import('../../components/readings/ReadingScale')).ReadingScale,
  import.meta.env.SSR ? ReadingScale : null,
);
const ReadAloud = late(async () => (await import('../../components/readings/ReadAloud')).ReadAloud);

/** A meter reading and what it means, worked out as it is typed; everything that was typed stands in the address. */
export function TryReading({ initial }: { initial: ReadingForm }) {
  const [form, change] = useViewInUrl<ReadingForm>(initial, DEFAULTS);
  const { question, faults, waiting } = useMemo(() => readForm(form), [form]);
  const answer = useMemo(() => (question ? interpretReading(question) : null), [question]);
  useEffect(() => {
    document.title = tryReading.questionWakeline(titleOf(question, answer));
  }, [question, answer]);
  const typed = (some: Partial<ReadingForm>) => change(some, 'typed');
  const choose = (some: Partial<ReadingForm>) => change(some, 'chosen');
  const place = chosen(PLACES, form.at, 'between');
  const cautions = answer?.cautions ?? [READING_CAUTION];

  return (
    <form method="get" onSubmit={(event) => event.preventDefault()} noValidate>
      <div className="grid gap-x-12 gap-y-6 lg:grid-cols-[minmax(0,500px)_minmax(0,1fr)]">
        <div className="min-w-0">
          <h1 className="text-[26px] leading-8 tracking-[-0.03em] sm:text-[32px] sm:leading-[38px]">
            {tryReading.whatDoesTheMeter}
          </h1>
          <p className="mb-3 mt-1 text-[15px] leading-5 text-ink-2">{HOW_TO_MEASURE[place]}</p>
          <StringPanel form={form} faults={faults} typed={typed} choose={choose} />
          <MeterPanel form={form} faults={faults} place={place} typed={typed} choose={choose} />
          <noscript>
            <button className="button-strong mt-3 w-full">{tryReading.sayWhatItMeans}</button>
          </noscript>
        </div>
        <div className="min-w-0 space-y-4">
          <AnswerSheet answer={answer} question={question} waiting={waiting} faults={faults} />
          {answer && question && <Scale answer={answer} question={question} />}
          {cautions.map((caution) => {
            const { strong, rest } = cautionParts(caution);
            return (
              <Caution key={caution} strong={strong}>
                {rest}
              </Caution>
            );
          })}
          {answer && question && (
            <Suspense>
              <ReadAloud text={aloud(answer, question)} />
            </Suspense>
          )}
          <KnownMore form={form} faults={faults} typed={typed} choose={choose} />
        </div>
      </div>
    </form>
  );
}
