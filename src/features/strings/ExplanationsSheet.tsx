import { useQuery } from '@tanstack/react-query';
import { NotRead } from '../../components/ui/NotRead';
import { Sheet } from '../../components/ui/Sheet';
import { Tag, type Tone } from '../../components/ui/Tag';
import { DayRatios } from '../../drawings/DayRatios';
import { percent, quantity } from '../../drawings/numbers';
import type { StringPage } from '../../schemas/api/string';
import type { ExplanationFit, StringExplanations, WorkbenchView } from '../../schemas/api/workbench';
import { paths } from '../../schemas/paths';
import { explanationsQuery } from './queries';
import { explanationsSheet } from '../../words/strings';

const FIT: Record<ExplanationFit['fit'], { word: string; tone: Tone; shape: string }> = {
  fits: { word: explanationsSheet.fits, tone: 'rust', shape: '▼' },
  partly: { word: explanationsSheet.inPart, tone: 'plain', shape: '◐' },
  cant_tell: { word: explanationsSheet.cantTell, tone: 'outline', shape: '?' },
  does_not: { word: explanationsSheet.doesNotFit, tone: 'slate', shape: '–' },
};
const HEADING: Record<NonNullable<StringExplanations['outcome']>, string> = {
  low: explanationsSheet.itMakesLessThan,
  as_expected: explanationsSheet.itMakesWhatIt,
  cant_tell: explanationsSheet.whetherItMakesWhat,
};

function Explanation({ of }: { of: ExplanationFit }) {
  const look = FIT[of.fit];
  return (
    <li className="border-t border-rule-faint py-3 first:border-t-0">
      <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
        <h3
          className={`text-[15px] leading-5 ${of.fit === 'does_not' ? 'font-medium text-ink-2' : 'font-semibold'}`}
        >
          {of.title}
        </h3>
        <span className="inline-flex items-center gap-2">
          {of.confidence !== null && <span className="text-sm">{percent(of.confidence)}</span>}
          <Tag tone={look.tone} shape={look.shape}>
            {look.word}
          </Tag>
        </span>
      </div>
      <p className="mt-0.5 text-sm leading-5 text-ink-2">{of.words}</p>
      {of.figures.length > 0 && (
        <table className="mt-1 w-full border-collapse text-sm sm:w-auto">
          <thead className="sr-only">
            <tr>
              <th scope="col">{explanationsSheet.figure}</th>
              <th scope="col">{explanationsSheet.measured}</th>
              <th scope="col">{explanationsSheet.ifItWereSo}</th>
            </tr>
          </thead>
          <tbody>
            {of.figures.map((f) => (
              <tr key={f.name}>
                <th scope="row" className="py-0.5 pr-4 text-left font-normal text-ink-2">
                  {f.name}
                </th>
                <td className="py-0.5 pr-4 text-right font-medium">{f.measured}</td>
                <td className="py-0.5 text-left text-ink-2">{explanationsSheet.wouldBe(f.would)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </li>
  );
}

/** Which explanation of a low string fits, each with its figures. */
export default function ExplanationsSheet({ page, view }: { page: StringPage; view: WorkbenchView }) {
  const found = useQuery(explanationsQuery(page.string.id, view.on || null));
  const data = found.data;
  return (
    <Sheet
      id="explanations"
      title={explanationsSheet.whichExplanationFits}
      aside={data?.day ? explanationsSheet.judgedAfter(data.day) : data && explanationsSheet.noNightJudgedYet}
    >
      <NotRead
        error={found.error}
        title={explanationsSheet.theJudgementCouldNot}
        kind="failed"
        onRetry={() => found.refetch()}
      />
      {found.isPending && <p role="status">{explanationsSheet.holdingTheExplanationsAgainst}</p>}
      {data && (
        <>
          <div className="grid gap-x-6 gap-y-3 md:grid-cols-[minmax(0,1fr)_minmax(0,420px)]">
            <div>
              {data.outcome && <p className="font-semibold">{HEADING[data.outcome]}</p>}
              <p className="mt-0.5 text-sm text-ink-2">{data.words}</p>
              {data.lossKWh && (
                <p className="mt-2">
                  <strong>{quantity(data.lossKWh.value, 'kWh', 1)}</strong>
                  {explanationsSheet.missingOverTheseDays(
                    data.days.length,
                    data.lossKWh.low,
                    data.lossKWh.high,
                  )}
                </p>
              )}
              {data.method === 'model' && (
                <p className="mt-2 text-sm text-ink-2">{explanationsSheet.fewerThanFiveStrings}</p>
              )}
            </div>
            {data.days.length > 0 && data.threshold && (
              <figure>
                <DayRatios days={data.days} limit={data.threshold.ratio} />
                <figcaption className="text-xs text-ink-3">
                  {explanationsSheet.madeOfWhatWas(data.threshold.source)}
                </figcaption>
              </figure>
            )}
          </div>
          <ul className="mt-3 border-t border-rule">
            {data.explanations.map((e) => (
              <Explanation key={e.key} of={e} />
            ))}
          </ul>
          <p className="mt-2 text-xs text-ink-3">
            {explanationsSheet.howEachIsTold}
            <a className="text-petrol underline underline-offset-2" href={paths.methods()}>
              {explanationsSheet.notesOnTheMethods}
            </a>
            .
          </p>
        </>
      )}
    </Sheet>
  );
}
