import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { NotRead } from '../../components/ui/NotRead';
import { Sheet } from '../../components/ui/Sheet';
import { LoopScatter } from '../../drawings/LoopScatter';
import { listed, number, percent, quantity } from '../../drawings/numbers';
import { fullTime, shortDate } from '../../drawings/times';
import { withQuery } from '../../lib/api';
import type { StringPage } from '../../schemas/api/string';
import type { StringLoop, WorkbenchView } from '../../schemas/api/workbench';
import { paths } from '../../schemas/paths';
import { loopQuery } from './queries';
import { loopSheet } from '../../words/string-history';

const day = (text: string): string => shortDate(`${text}T12:00:00Z`, 'UTC');

function PointsTable({ loop }: { loop: StringLoop }) {
  return (
    <div
      className="max-h-[330px] overflow-auto"
      tabIndex={0}
      role="region"
      aria-label={loopSheet.pointsOfTheResistance}
    >
      <table className="w-full border-collapse text-right">
        <caption className="sr-only">{loopSheet.sumOfTheUnits}</caption>
        <thead className="sticky top-0 bg-sheet text-sm text-ink-2">
          <tr className="border-b border-rule">
            <th scope="col" className="py-1.5 pr-4 text-left font-medium">
              {loopSheet.time}
            </th>
            <th scope="col" className="py-1.5 pl-3 font-medium">
              {loopSheet.currentA}
            </th>
            <th scope="col" className="py-1.5 pl-3 font-medium">
              {loopSheet.sumLessInputV}
            </th>
          </tr>
        </thead>
        <tbody>
          {loop.points.map((p) => (
            <tr key={p.at} className="border-b border-rule-faint">
              <th scope="row" className="py-1 pr-4 text-left font-normal">
                {fullTime(p.at * 1000, loop.timeZone)}
              </th>
              <td className="py-1 pl-3">{number(p.ownA, 2)}</td>
              <td className="py-1 pl-3">{number(p.gapV, 2)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Figures({ loop }: { loop: StringLoop }) {
  const { fit } = loop;
  if (!fit) return null;
  const rows: [string, string][] = [
    [loopSheet.resistance, loopSheet.timesInFromTo(fit.ohm, fit.low, fit.high)],
    [loopSheet.cableByTheAs, quantity(loop.cableOhm, 'Ω', 3)],
    [loopSheet.heatOfAllOf, loopSheet.ohmAtHighestA(fit.ohm, fit.highestA)],
    [loopSheet.gainErrorTakenOut, percent(fit.gain, 2)],
    ...(fit.sharedOhm === null
      ? []
      : [[loopSheet.sharedWithTheOther, quantity(fit.sharedOhm, 'Ω', 3)] as [string, string]]),
    [loopSheet.samples, number(fit.samples)],
  ];
  return (
    <dl className="mt-2 grid gap-x-6 gap-y-1 text-sm sm:grid-cols-[auto_1fr]">
      {rows.map(([name, value]) => (
        <div key={name} className="contents">
          <dt className="text-ink-2">{name}</dt>
          <dd className="mb-1 sm:mb-0">{value}</dd>
        </div>
      ))}
    </dl>
  );
}

/** Sum of the units against the input: the resistance of everything between them. */
export default function LoopSheet({ page, view }: { page: StringPage; view: WorkbenchView }) {
  const [asTable, setAsTable] = useState(false);
  const loop = useQuery(loopQuery(page.string.id, view.on || null));
  const data = loop.data;
  return (
    <Sheet
      id="loop"
      title={loopSheet.unitsAgainstTheInput}
      aside={data && loopSheet.fromDayToDay(day(data.fromDay), day(data.day))}
    >
      <NotRead
        error={loop.error}
        title={loopSheet.theSamplesCouldNot}
        kind="failed"
        onRetry={() => loop.refetch()}
      />
      {loop.isPending && <p role="status">{loopSheet.fetchingThreeDaysOf}</p>}
      {data && (
        <>
          <p className="font-medium">{data.words}</p>
          {data.points.length > 0 && (
            <>
              <div className="no-print mb-1 mt-2 flex justify-end gap-2">
                <Button className="!px-3" aria-pressed={asTable} onClick={() => setAsTable(!asTable)}>
                  {asTable ? loopSheet.points : loopSheet.table}
                </Button>
                <ButtonLink
                  className="!px-3"
                  download
                  href={withQuery(paths.api.stringLoopCsv(page.string.id), { on: view.on || null })}
                >
                  CSV
                </ButtonLink>
              </div>
              {asTable ? (
                <PointsTable loop={data} />
              ) : (
                <>
                  <LoopScatter
                    points={data.points}
                    fit={data.fit}
                    className="hidden max-w-[900px] sm:block"
                  />
                  <div className="sm:hidden">
                    <LoopScatter points={data.points} fit={data.fit} width={360} height={280} />
                  </div>
                </>
              )}
            </>
          )}
          <Figures loop={data} />
          {data.couldBe.length > 0 && (
            <p className="mt-2 text-sm text-ink-2">{loopSheet.itCouldBe(listed(data.couldBe))}</p>
          )}
          <p className="mt-2 text-xs text-ink-3">
            {loopSheet.eachPointTheSum(data.threshold.ohm, data.threshold.source)}
          </p>
        </>
      )}
    </Sheet>
  );
}
