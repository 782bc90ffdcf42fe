import { Button } from '../../components/ui/Button';
import { clock, shortDate } from '../../drawings/times';
import { momentBar } from '../../words/strings';

interface Props {
  from: number;
  to: number;
  /** The server's clock, epoch s: nothing later can be looked at. */
  now: number;
  /** s from one moment to the next. */
  stepS: number;
  /** Epoch s; null: now. */
  moment: number | null;
  timeZone: string;
  /** null: back to now. */
  onMoment: (at: number | null, done: boolean) => void;
}

/** The moment that the staircase shows: a slider as wide as the history, and steps for a thumb. */
export function MomentBar({ from, to, now, stepS, moment, timeZone, onMoment }: Props) {
  const last = Math.min(to, now);
  const max = Math.max(from, Math.floor(last / stepS) * stepS);
  const min = Math.ceil(from / stepS) * stepS;
  const value = Math.min(max, Math.max(min, moment ?? max));
  const outside = moment !== null && (moment < from || moment > to);
  const words =
    moment === null
      ? momentBar.now
      : `${clock(moment * 1000, timeZone)}, ${shortDate(moment * 1000, timeZone)}${outside ? momentBar.outsideOfWhatIs : ''}`;
  const go = (by: number) => onMoment(Math.min(now, Math.max(1_500_000_000, (moment ?? max) + by)), true);
  if (max <= min) return null;
  return (
    <div className="no-print mt-2 flex flex-wrap items-center gap-x-3 gap-y-1">
      <label className="flex min-w-[200px] flex-1 items-center gap-3 text-sm text-ink-2">
        <span className="whitespace-nowrap">{momentBar.staircaseAt}</span>
        <input
          type="range"
          min={min}
          max={max}
          step={stepS}
          value={value}
          aria-label={momentBar.momentOfTheStaircase}
          aria-valuetext={words}
          onChange={(event) => onMoment(Number(event.target.value), false)}
          onPointerUp={(event) => onMoment(Number(event.currentTarget.value), true)}
          onKeyUp={(event) => onMoment(Number(event.currentTarget.value), true)}
          className="h-11 min-w-0 flex-1 accent-[var(--ink)]"
        />
      </label>
      <output className="min-w-[104px] text-sm font-medium">{words}</output>
      <div className="flex gap-1">
        <Button className="!px-3" onClick={() => go(-stepS)}>
          {momentBar.stepSMin(stepS)}
        </Button>
        <Button className="!px-3" disabled={moment === null} onClick={() => go(stepS)}>
          {momentBar.stepSMin2(stepS)}
        </Button>
        <Button className="!px-3" disabled={moment === null} onClick={() => onMoment(null, true)}>
          {momentBar.now2}
        </Button>
      </div>
    </div>
  );
}
