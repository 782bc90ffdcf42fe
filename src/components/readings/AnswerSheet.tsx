import type { Interpretation } from '../../domain/readings/interpret';
import type { ReadingQuestion } from '../../domain/readings/reading';
import { Comb } from '../../drawings/Comb';
import { later } from '../../lib/later';
import { Sheet } from '../ui/Sheet';
import { Tag, type Tone } from '../ui/Tag';
import { likelyComb } from './likely-comb';
import { PAINT } from './paint';
import type { Faults } from './form';
import { chance, helpWords, hueOf, initiatorWords, outcomeWords, reasoning, shownHypotheses } from './words';
import { answerSheet } from '../../words/shared-readings';

/** Drawings say what the words beside them say: they may come after. */
const Units = later(
  async () => (await import('../../drawings/Comb')).Comb,
  import.meta.env.SSR ? Comb : null,
);

interface Props {
  answer: Interpretation | null;
  question: ReadingQuestion | null;
  waiting: boolean;
  faults: Faults;
}

/** What the reading means: explanations with their chances, what they rest on, what helped. */
export function AnswerSheet({ answer, question, waiting, faults }: Props) {
  if (!answer || !question)
    return (
      <Sheet id="answer">
        <h2 className="text-[15px] font-semibold">
          {waiting ? answerSheet.typeWhatTheMeter : answerSheet.somethingHasToBe}
        </h2>
        {waiting ? (
          <p className="mt-1 text-ink-2">{answerSheet.whatItCanMean}</p>
        ) : (
          <ul className="mt-1 list-disc pl-5 text-rust-ink">
            {Object.entries(faults).map(([key, fault]) => (
              <li key={key}>{fault}</li>
            ))}
          </ul>
        )}
      </Sheet>
    );
  const shown = shownHypotheses(answer).map((h) => ({ h, comb: likelyComb(h, question) }));
  const best = shown[0]?.h;
  return (
    <Sheet id="answer">
      <h2 className="mb-3 flex flex-wrap items-center gap-2">
        <span className="sr-only">{answerSheet.whatItMeans}</span>
        <Tag tone={toneOf(answer, question)}>{outcomeWords(answer)}</Tag>
      </h2>
      <p role="status" className="sr-only">
        {`${outcomeWords(answer)}. ${best ? `${best.words}, ${chance(best.probability)}` : ''}`}
      </p>
      <ol className="space-y-3">
        {shown.map(({ h, comb }) => (
          <li key={`${h.kind} ${h.count}`}>
            {h.asExpected && h !== best && <p className="text-sm text-ink-2">{answerSheet.expectedWas}</p>}
            <div className="flex items-start justify-between gap-3">
              <span className="text-[15px] font-semibold leading-5 tracking-[-0.01em]">{h.words}</span>
              <span className="shrink-0 text-[15px]">{chance(h.probability)}</span>
            </div>
            <div aria-hidden="true" className="mt-1.5 h-[6px] rounded-full bg-rule-faint">
              <div
                className={`h-full min-w-[3px] rounded-full ${PAINT[hueOf(h, question)].bar}`}
                style={{ width: `${(100 * h.probability).toFixed(2)}%` }}
              />
            </div>
            {comb && (
              <div aria-hidden="true" className="mt-1.5">
                <Units id={`likely-${h.kind}-${h.count}`} slots={comb} width={320} height={16} />
              </div>
            )}
          </li>
        ))}
      </ol>
      {shown.some(({ comb }) => comb) && (
        <p className="mt-2 text-sm text-ink-2">{answerSheet.theBarsStandFor}</p>
      )}
      <p className="mt-3 text-[15px] leading-[21px] text-ink-2">{reasoning(answer, question).join(' ')}</p>
      {answer.earth && (
        <div className="mt-4 border-t border-rule-faint pt-3">
          <h3 className="font-semibold">{answerSheet.readingsToEarth}</h3>
          <p className={answer.earth.outcome === 'fault' ? 'font-medium text-rust-ink' : 'text-ink-2'}>
            {answer.earth.words}{' '}
            {answer.earth.outcome === 'no_fault_seen' || answer.earth.probability === null
              ? ''
              : answerSheet.chanceOfFaultTo(chance(answer.earth.probability))}
          </p>
        </div>
      )}
      <div className="mt-4 border-t border-rule-faint pt-3">
        <h3 className="font-semibold">{answerSheet.doesItFollowThe}</h3>
        <p className="text-ink-2">{initiatorWords(answer, question)}</p>
      </div>
      {answer.helped.length > 0 && (
        <div className="mt-3 border-t border-rule-faint pt-3">
          <h3 className="font-semibold">{answerSheet.whatEachThingKnown}</h3>
          <ul className="text-ink-2">
            {answer.helped.map((help) => {
              const { name, words } = helpWords(help);
              return (
                <li key={help.what}>
                  <span className="text-ink">{name}</span>: {words}.
                </li>
              );
            })}
          </ul>
        </div>
      )}
    </Sheet>
  );
}

function toneOf(answer: Interpretation, question: ReadingQuestion): Tone {
  const best = answer.hypotheses[0];
  if (!best || answer.outcome === 'proves_nothing') return 'slate';
  if (answer.outcome === 'cant_tell') return 'outline';
  return hueOf(best, question);
}
