import type { Interpretation } from '../../domain/readings/interpret';
import type { ReadingQuestion } from '../../domain/readings/reading';
import { PAINT } from './paint';
import { scaleOf } from './scale';
import { expectedWords } from './words';
import { readingScale } from '../../words/shared-readings';

const share = (at: number): string => `${(100 * at).toFixed(2)}%`;
/** Near an edge a label hangs inwards. */
const hang = (at: number): string => (at > 0.9 ? '-100%' : at < 0.06 ? '0%' : '-50%');

/** The reading on a ruler of voltage, the expected span behind it. */
export function ReadingScale({ answer, question }: { answer: Interpretation; question: ReadingQuestion }) {
  const scale = scaleOf(answer, question);
  const expected = expectedWords(answer);
  return (
    <figure className="px-1">
      <div aria-hidden="true" className="relative h-[66px]">
        {scale.bands.map((band, i) => (
          <div
            key={i}
            className={`absolute ${band.expected ? 'h-[38px]' : 'h-[14px]'} bottom-[20px] ${PAINT[band.hue].bar} ${band.expected ? 'opacity-25' : 'opacity-40'}`}
            style={{ left: share(band.from), width: share(band.to - band.from) }}
          />
        ))}
        {scale.ticks.map((tick) => (
          <div key={tick.at}>
            <div
              className="absolute bottom-[20px] h-[18px] w-[1.5px] bg-rule"
              style={{ left: share(tick.at) }}
            />
            {tick.label && (
              <span
                className="absolute bottom-0 text-xs text-ink-2"
                style={{ left: share(tick.at), transform: `translateX(${hang(tick.at)})` }}
              >
                {tick.label}
              </span>
            )}
          </div>
        ))}
        <div className="absolute inset-x-0 bottom-[19px] h-[1.5px] bg-ink" />
        <div
          className={`absolute bottom-[20px] h-[30px] w-[3px] ${PAINT[scale.reading.hue].bar}`}
          style={{ left: share(scale.reading.at), transform: 'translateX(-1px)' }}
        />
        <span
          className={`absolute top-0 text-sm font-semibold leading-4 ${PAINT[scale.reading.hue].text}`}
          style={{ left: share(scale.reading.at), transform: `translateX(${hang(scale.reading.at)})` }}
        >
          {scale.reading.label}
        </span>
      </div>
      <figcaption className="mt-1 flex flex-wrap justify-between gap-x-4 text-xs text-ink-2">
        <span>{scale.step}</span>
        {expected && <span className="text-ink">{readingScale.expected(expected.words)}</span>}
      </figcaption>
    </figure>
  );
}
