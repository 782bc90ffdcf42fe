import { SCREEN, type Paint } from './paint';
import { dayCalendar } from '../words/drawings-output';

export interface CalendarDay {
  /** yyyy-mm-dd */
  day: string;
  /** 0 … 1 of the best day; null: no record. */
  share: number | null;
  /** What is written in it. */
  text: string;
  /** Read out, and shown on pointing at it. */
  words: string;
  /** Worth a second look: data missing, or stopped. */
  marked: boolean;
}
interface Props {
  days: readonly CalendarDay[];
  caption: string;
  paint?: Paint;
}

const WEEKDAYS = [
  dayCalendar.mon,
  dayCalendar.tue,
  dayCalendar.wed,
  dayCalendar.thu,
  dayCalendar.fri,
  dayCalendar.sat,
  dayCalendar.sun,
];
/** 0: Monday */
const weekday = (day: string): number => (new Date(`${day}T12:00:00Z`).getUTCDay() + 6) % 7;
/** So that the number in a cell stays readable on it in both themes. */
const DEEPEST = 0.42;

const Cell = ({ day, paint }: { day: CalendarDay; paint: Paint }) => (
  <td className="relative h-[52px] border border-rule-faint p-0 align-top" title={day.words}>
    <svg className="absolute inset-0 h-full w-full" aria-hidden="true">
      {day.share === null ? (
        <line x1="0" y1="100%" x2="100%" y2="0" stroke={paint.rule} strokeWidth="1" />
      ) : (
        <rect width="100%" height="100%" fill={paint.petrol} fillOpacity={(day.share * DEEPEST).toFixed(3)} />
      )}
      {day.marked && <rect width="100%" height="3" y="0" fill={paint.rust} />}
    </svg>
    <span className="relative block px-1 pt-1.5 text-xs leading-4 sm:px-1.5">
      <span className="text-ink-2">{Number(day.day.slice(8))}</span>
      <span className="block truncate tabular-nums" aria-hidden="true">
        {day.text}
      </span>
      <span className="sr-only">{day.words}</span>
    </span>
  </td>
);

/** The days of one month in weeks, the deeper the more was made. */
export function DayCalendar({ days, caption, paint = SCREEN }: Props) {
  const first = days[0] ? weekday(days[0].day) : 0;
  const cells: (CalendarDay | null)[] = [...Array.from({ length: first }, () => null), ...days];
  while (cells.length % 7 !== 0) cells.push(null);
  const weeks = Array.from({ length: cells.length / 7 }, (_, w) => cells.slice(w * 7, w * 7 + 7));
  return (
    <table className="w-full table-fixed border-collapse">
      <caption className="sr-only">{caption}</caption>
      <thead>
        <tr>
          {WEEKDAYS.map((name) => (
            <th key={name} scope="col" className="pb-1 text-left text-xs font-normal text-ink-2">
              {name}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {weeks.map((week, w) => (
          <tr key={w}>
            {week.map((day, d) =>
              day ? <Cell key={day.day} day={day} paint={paint} /> : <td key={d} className="h-[52px]" />,
            )}
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** A year in twelve lines of days. */
export function YearCalendar({
  days,
  label,
  monthLabel,
  paint = SCREEN,
}: {
  days: readonly CalendarDay[];
  label: string;
  monthLabel: (month: number) => string;
  paint?: Paint;
}) {
  const months = Array.from({ length: 12 }, (_, i) =>
    days.filter((d) => Number(d.day.slice(5, 7)) === i + 1),
  );
  return (
    <div role="img" aria-label={label} className="grid gap-y-1">
      {months.map((month, i) => (
        <div key={i} className="grid grid-cols-[2.6rem_minmax(0,1fr)] items-center gap-x-2">
          <span className="text-xs text-ink-2" aria-hidden="true">
            {monthLabel(i + 1).slice(0, 3)}
          </span>
          <svg width="100%" height="18" className="block">
            {month.map((d) => {
              const x = ((Number(d.day.slice(8)) - 1) / 31) * 100;
              return (
                <g key={d.day}>
                  <rect
                    x={`${x.toFixed(2)}%`}
                    width="2.9%"
                    height="16"
                    fill={d.share === null ? 'none' : paint.petrol}
                    fillOpacity={d.share === null ? undefined : (0.08 + d.share * 0.8).toFixed(3)}
                    stroke={d.share === null ? paint.rule : 'none'}
                  >
                    <title>{d.words}</title>
                  </rect>
                  {d.marked && <rect x={`${x.toFixed(2)}%`} width="2.9%" height="3" fill={paint.rust} />}
                </g>
              );
            })}
          </svg>
        </div>
      ))}
    </div>
  );
}
