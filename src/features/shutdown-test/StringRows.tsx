import { Button } from '../../components/ui/Button';
import { Tag } from '../../components/ui/Tag';
import { volts } from '../../drawings/numbers';
import type { TestReading } from '../../domain/commissioning/shutdown-test-record';
import type { StringNow } from './round';
import { stringRows } from '../../words/shutdown-test-report';

/** One reading in a line: "8.4 · 0.1 · −0.1 V at 22 s". */
export function readingWords(r: TestReading): string {
  const { positiveToNegativeV: pn, positiveToEarthV: pe, negativeToEarthV: ne } = r.voltages;
  const figures = [
    [stringRows.to, pn],
    [stringRows.toEarth, pe],
    [stringRows.toEarth2, ne],
  ] as const;
  const read = figures.flatMap(([name, v]) => (v === null ? [] : [`${name} ${volts(v)}`])).join(', ');
  const when =
    r.moment === 'before' ? stringRows.beforeTheCommand : stringRows.afterIt(Math.round(r.afterS ?? 0));
  return `${read}, ${when}${r.atInverterEnd ? '' : stringRows.notAtTheInverters}`;
}

function Now({ s, timeLimitS, sinceS }: { s: StringNow; timeLimitS: number; sinceS: number | null }) {
  if (sinceS === null)
    return <span className="text-ink-2">{s.points.length > 0 ? '' : stringRows.waitingForTheCommand}</span>;
  if (!s.newest) return <span className="text-ink-2">{stringRows.nothingReported}</span>;
  const over = s.newest.volts > s.limitV;
  const late = s.newest.afterS >= timeLimitS;
  return (
    <span className="inline-flex flex-wrap items-center gap-x-2">
      <span className="tabular-nums">
        <span className="text-[17px] font-semibold">{volts(s.newest.volts)}</span>{' '}
        <span className="text-sm text-ink-2">{stringRows.atAfterSs(Math.round(s.newest.afterS))}</span>
      </span>
      {s.underFromS !== null ? (
        <Tag tone="plum" shape="▁">
          {stringRows.limitVvOrLess(s.limitV, s.underFromS, Math.ceil(s.underFromS))}
        </Tag>
      ) : over && late && !s.capacitors ? (
        <Tag tone="crimson" shape="▲">
          {stringRows.overPast(s.limitV, timeLimitS)}
        </Tag>
      ) : (
        <Tag tone="outline">{stringRows.overLimitVv(s.limitV)}</Tag>
      )}
    </span>
  );
}

interface Props {
  strings: readonly StringNow[];
  timeLimitS: number;
  /** Seconds since the command; null before it. */
  sinceS: number | null;
  released: boolean;
  mayWrite: boolean;
  onRead: (string: StringNow, moment: 'before' | 'after') => void;
  onStrike: (reading: TestReading) => void;
}

/** The strings of a round: what is reported of each now, what was measured, and the way to add a reading. */
export function StringRows({ strings, timeLimitS, sinceS, released, mayWrite, onRead, onStrike }: Props) {
  const moment = sinceS === null ? 'before' : 'after';
  return (
    <ul>
      {strings.map((s) => {
        const units = s.conduct?.units.filter((u) => u.serial !== null) ?? [];
        const down = units.filter((u) => u.followed !== null || u.downBefore).length;
        const gone = units.filter((u) => u.followed !== null).length;
        const back = units.filter((u) => u.followed !== null && u.returned !== null).length;
        return (
          <li key={s.part.id} className="border-b border-rule-faint py-2 last:border-b-0">
            <div className="flex items-center justify-between gap-3">
              <p className="text-[17px] font-semibold">{s.part.name}</p>
              {mayWrite && !released && (
                <Button onClick={() => onRead(s, moment)}>
                  {moment === 'before' ? stringRows.readBefore : stringRows.addReading}
                  <span className="sr-only">
                    {moment === 'before'
                      ? stringRows.theCommand(s.part.name)
                      : stringRows.ofAfterTheCommand(s.part.name)}
                  </span>
                </Button>
              )}
            </div>
            {!released && <Now s={s} timeLimitS={timeLimitS} sinceS={sinceS} />}
            <p className="text-sm text-ink-2">
              {!released &&
                sinceS !== null &&
                s.part.kind !== 'shutdown_only' &&
                stringRows.ofInShutdown(down, units.length)}
              {released &&
                s.part.kind !== 'shutdown_only' &&
                stringRows.ofWentCameBack(gone, units.length, back)}
              {s.newest || s.points.length > 0
                ? s.source
                : s.part.kind === 'shutdown_only'
                  ? stringRows.itsUnitsTellNothing
                  : ''}
              {!s.part.homeRunLeavesArray && stringRows.homeRunInsideThe}
            </p>
            {s.readings.map((r) => (
              <p
                key={r.id}
                className={`mt-1 flex flex-wrap items-center gap-x-3 text-sm ${r.struck ? 'text-ink-2 line-through' : ''}`}
              >
                <span>
                  ○ {readingWords(r)}
                  {r.struck && stringRows.struckReason(r.struck.reason)}
                </span>
                {mayWrite && !r.struck && (
                  <button
                    type="button"
                    className="target text-petrol underline underline-offset-2"
                    onClick={() => onStrike(r)}
                  >
                    {stringRows.strike}
                  </button>
                )}
              </p>
            ))}
          </li>
        );
      })}
    </ul>
  );
}
