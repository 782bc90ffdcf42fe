import { Sheet } from '../../components/ui/Sheet';
import { DayCurve } from '../../drawings/DayCurve';
import { clock } from '../../drawings/times';
import type { CustomerSite } from '../../schemas/api/customer';
import { clearDayWords } from './cards';
import { dayHours } from './day-hours';
import { todaySheet } from '../../words/customer';

interface Props {
  today: CustomerSite['today'];
  at: string;
  timeZone: string;
}

/** What the curve shows, for those who do not see it. */
export const dayLabel = (today: CustomerSite['today']): string =>
  today.energy === null
    ? todaySheet.nothingKnown
    : todaySheet.powerMadeTodayN(today.energy, today.clearEnergyUntilNow);

/** The day so far as a curve beside a clear day of its date, and as a table. */
export function TodaySheet({ today, at, timeZone }: Props) {
  const curve = dayHours(today, at);
  const label = dayLabel(today);
  return (
    <Sheet
      id="today"
      title={todaySheet.today}
      aside={todaySheet.solidMade(clearDayWords(today.clearFrom))}
      flush
    >
      <div className="hidden sm:block">
        <DayCurve {...curve} label={label} width={860} height={270} />
      </div>
      <div className="sm:hidden">
        <DayCurve {...curve} label={label} width={360} height={210} />
      </div>
      {today.energy === null && <p className="mt-2 text-ink-2">{todaySheet.nothingIsKnownOfToday}</p>}
      <details className="mt-2 text-sm text-ink-2">
        <summary className="inline-flex min-h-[36px] cursor-pointer items-center underline underline-offset-2">
          {todaySheet.sameAsTable}
        </summary>
        <div
          className="mt-2 max-h-[320px] overflow-auto"
          tabIndex={0}
          role="region"
          aria-label={todaySheet.todayAsATable}
        >
          <table className="w-full max-w-[420px] text-left">
            <caption className="sr-only">{todaySheet.meanPowerOfEach}</caption>
            <thead>
              <tr className="border-b border-rule">
                <th scope="col" className="py-1 font-medium">
                  {todaySheet.from}
                </th>
                <th scope="col" className="py-1 text-right font-medium">
                  {todaySheet.madeKw}
                </th>
                <th scope="col" className="py-1 text-right font-medium">
                  {todaySheet.clearDayKw}
                </th>
              </tr>
            </thead>
            <tbody>
              {curve.rows.map((r) => (
                <tr key={r.at} className="border-b border-rule-faint">
                  <td className="py-1">{clock(r.at, timeZone)}</td>
                  <td className="py-1 text-right">{r.made === null ? '–' : (r.made / 1000).toFixed(1)}</td>
                  <td className="py-1 text-right">{(r.clear / 1000).toFixed(1)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </Sheet>
  );
}
