import { ButtonLink } from '../../components/ui/Button';
import { periodOf, type Period } from '../../domain/output/period';
import { withQuery } from '../../lib/api';
import { periodPicker } from '../../words/figures';

interface Props {
  path: string;
  period: Period;
  /** yyyy-mm-dd: later periods are not offered. */
  today: string;
}

/** The period before and after, the year around a month, and back to now: plain links, so that each can be kept. */
export function PeriodPicker({ path, period, today }: Props) {
  const to = (key: string): string => withQuery(path, { period: key });
  const next = periodOf(period.next);
  const other =
    period.kind === 'month'
      ? period.key.slice(0, 4)
      : today.startsWith(period.key)
        ? today.slice(0, 7)
        : `${period.key}-12`;
  return (
    <nav aria-label={periodPicker.period} className="no-print mb-5 flex flex-wrap items-center gap-2">
      <ButtonLink
        href={to(period.previous)}
        rel="prev"
        aria-label={periodPicker.beforePrevious(periodOf(period.previous)?.label)}
      >
        ←
      </ButtonLink>
      <span className="min-w-[9.5rem] text-center font-semibold">{period.label}</span>
      {next && next.from <= today ? (
        <ButtonLink href={to(period.next)} rel="next" aria-label={periodPicker.afterNext(next.label)}>
          →
        </ButtonLink>
      ) : (
        <span className="w-[46px]" />
      )}
      <ButtonLink href={to(other)}>
        {period.kind === 'month' ? periodPicker.theYear(other) : (periodOf(other)?.label ?? other)}
      </ButtonLink>
      {!today.startsWith(period.key) && <ButtonLink href={path}>{periodPicker.thisMonth}</ButtonLink>}
    </nav>
  );
}
