import { Sheet } from '../../components/ui/Sheet';
import { percent } from '../../drawings/numbers';
import type { Readings } from './advice';
import { readingsSheet } from '../../words/strings';

const BAR = {
  rust: 'bg-rust',
  crimson: 'bg-crimson',
  plum: 'bg-plum',
  slate: 'bg-slate',
  petrol: 'bg-petrol',
} as const;

/** What the readings say: the likeliest first, a figure only where a judgement gave one, then what else it could be. */
export function ReadingsSheet({ readings }: { readings: Readings }) {
  const { main, couldBe, source } = readings;
  if (!main) return null;
  return (
    <Sheet title={readingsSheet.whatTheReadingsSay} id="readings">
      <div className="flex items-baseline justify-between gap-3">
        <h3 className="text-[15px] font-semibold leading-5">{main.title}</h3>
        {main.confidence !== null && <span className="text-[15px]">{percent(main.confidence)}</span>}
      </div>
      {main.confidence !== null && (
        <div className="mt-1.5 h-1.5 overflow-hidden rounded-full bg-rule-faint" aria-hidden="true">
          <div
            className={`h-full rounded-full ${BAR[main.tone]}`}
            style={{ width: `${main.confidence * 100}%` }}
          />
        </div>
      )}
      {main.text && <p className="mt-1.5 text-sm leading-5 text-ink-2">{main.text}</p>}
      {couldBe.length > 0 && (
        <>
          <h4 className="mt-3 text-sm font-medium">{readingsSheet.whyOrWhatElse}</h4>
          <ul className="mt-1 list-disc space-y-0.5 pl-5 text-sm leading-5 text-ink-2">
            {couldBe.map((other) => (
              <li key={other}>{other}</li>
            ))}
          </ul>
        </>
      )}
      {(source || main.confidence !== null) && (
        <p className="mt-3 text-xs text-ink-3">{readingsSheet.sourceLimitSourceAccording(source)}</p>
      )}
    </Sheet>
  );
}
