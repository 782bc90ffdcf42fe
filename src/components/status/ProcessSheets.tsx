import { MinuteLines } from '../../drawings/MinuteLines';
import { listed } from '../../drawings/numbers';
import { HISTORY_HOURS, type HistoryHours, type ProcessHistory } from '../../schemas/api/processes';
import { paths } from '../../schemas/paths';
import { Notice } from '../ui/Notice';
import { Sheet } from '../ui/Sheet';
import { isQuiet, lineOf, MARK_WORDS, marksOf, newest, PICTURES, type Picture } from './process-lines';
import { processSheets } from '../../words/status';
import { When } from './When';

interface Shown {
  history: ProcessHistory;
  from: number;
  to: number;
  timeZone: string;
}

function One({ picture, history, from, to, timeZone }: Shown & { picture: Picture }) {
  const { samples } = history;
  const marks = marksOf(samples, picture.marked, from, to);
  const markWords = picture.marked ? MARK_WORDS[picture.marked] : undefined;
  const figures = picture.lines.map((line) => ({ name: line.name, words: newest(samples, line, picture) }));
  const said = figures.map((f) => (f.name ? `${f.name} ${f.words}` : f.words)).join(', ');
  return (
    <figure className="min-w-0">
      <figcaption className="mb-1">
        <span className="block text-sm text-ink-2">{picture.title}</span>
        <span className="text-sm">
          {figures.map(({ name, words }, i) => (
            <span key={name ?? i} className="ml-2 whitespace-nowrap first:ml-0">
              {name && (
                <span className="text-ink-2">{i === 0 ? `${name} ` : processSheets.nameDashed(name)}</span>
              )}
              <span className="font-semibold">{words}</span>
            </span>
          ))}
        </span>
      </figcaption>
      <MinuteLines
        from={from}
        to={to}
        timeZone={timeZone}
        lines={picture.lines.map((line) => lineOf(samples, line, from, to))}
        marks={marks}
        label={`${picture.title}: ${said}${marks.length > 0 && markWords ? processSheets.markWordsAtMarks(markWords, marks.length) : ''}`}
      />
      {marks.length > 0 && markWords && (
        <p className="text-sm text-rust-ink">
          <span aria-hidden="true">▏</span>
          {processSheets.markWordsAtMarks2(markWords, marks.length)}
        </p>
      )}
    </figure>
  );
}

function Process(shown: Shown) {
  const { history, timeZone, to } = shown;
  const nowAt = new Date(to * 1000).toISOString();
  return (
    <Sheet
      id={`process-${history.process.slice(0, 8)}`}
      level={3}
      title={processSheets.processOn(history.process.slice(0, 8), history.host, listed(history.roles))}
      aside={
        <>
          {processSheets.numberRunsSince(history.pid)}
          <When at={history.startedAt} now={nowAt} timeZone={timeZone} />
        </>
      }
    >
      <div className="grid gap-x-8 gap-y-5 sm:grid-cols-2 xl:grid-cols-4">
        {PICTURES.filter((p) => p.role === undefined || history.roles.includes(p.role)).map((picture) => (
          <One key={picture.title} picture={picture} {...shown} />
        ))}
      </div>
    </Sheet>
  );
}

interface Props {
  histories: readonly ProcessHistory[];
  hours: HistoryHours;
  /** ISO time of the reading. */
  at: string;
  timeZone: string;
}

/** How each process of the installation fared in the last hours, in pictures. */
export function ProcessSheets({ histories, hours, at, timeZone }: Props) {
  const to = Date.parse(at) / 1000;
  const from = to - hours * 3600;
  const running = histories.filter((h) => !isQuiet(h, to));
  const ended = histories.filter((h) => isQuiet(h, to));
  return (
    <section aria-labelledby="processes-title" className="space-y-4">
      <div className="flex flex-wrap items-baseline justify-between gap-x-4">
        <h2 id="processes-title" className="text-[18px] leading-6 tracking-[-0.01em]">
          {processSheets.inTheLast(running.length, hours)}
        </h2>
        <nav aria-label={processSheets.howFarBack} className="flex">
          {HISTORY_HOURS.map((choice) => (
            <a
              key={choice}
              href={paths.status(choice)}
              aria-current={choice === hours ? 'true' : undefined}
              className={`target inline-flex items-center px-2 text-sm ${choice === hours ? 'font-semibold text-ink' : 'link'}`}
            >
              {choice} h
            </a>
          ))}
        </nav>
      </div>
      {running.length === 0 && (
        <Notice kind="empty" title={processSheets.noProcessHasTold}>
          {processSheets.theFirstComeA}
        </Notice>
      )}
      {running.map((history) => (
        <Process key={history.process} history={history} from={from} to={to} timeZone={timeZone} />
      ))}
      {ended.length > 0 && (
        <p className="text-sm text-ink-2">
          {processSheets.endedOrAwayFrom}
          {ended.slice(0, 12).map((h, i) => {
            const last = new Date((h.samples.at(-1)?.at ?? 0) * 1000).toISOString();
            return (
              <span key={h.process}>
                {i > 0 && '; '}
                {processSheets.onLastHeard(h.process.slice(0, 8), h.host, listed(h.roles))}
                <When at={last} now={at} timeZone={timeZone} />
              </span>
            );
          })}
          {ended.length > 12 && processSheets.andMore(ended.length)}.
        </p>
      )}
    </section>
  );
}
