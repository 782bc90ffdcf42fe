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

const day = (text: string): string => shortDate(`${text}T12:00:00Z`, 'UTC');

function PointsTable({ loop }: { loop: StringLoop }) {
  return (
    <div
      className="max-h-[330px] overflow-auto"
      tabIndex={0}
      role="region"
      aria-label="Points of the resistance, figures"
    >
      <table className="w-full border-collapse text-right">
        <caption className="sr-only">Sum of the units less the input over the current</caption>
        <thead className="sticky top-0 bg-sheet text-sm text-ink-2">
          <tr className="border-b border-rule">
            <th scope="col" className="py-1.5 pr-4 text-left font-medium">
              Time
            </th>
            <th scope="col" className="py-1.5 pl-3 font-medium">
              Current, A
            </th>
            <th scope="col" className="py-1.5 pl-3 font-medium">
              Sum less input, V
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
    [
      'Resistance',
      `${quantity(fit.ohm, 'Ω', 3)}, 19 times in 20 from ${number(fit.low, 3)} to ${number(fit.high, 3)}`,
    ],
    ['Cable by the as-built', quantity(loop.cableOhm, 'Ω', 3)],
    [
      'Heat of all of it',
      `${quantity(fit.ohm * fit.highestA ** 2, 'W')} at ${quantity(fit.highestA, 'A', 1)}`,
    ],
    ['Gain error taken out', percent(fit.gain, 2)],
    ...(fit.sharedOhm === null
      ? []
      : [
          ['Shared with the other strings of the input', quantity(fit.sharedOhm, 'Ω', 3)] as [string, string],
        ]),
    ['Samples', number(fit.samples)],
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
      title="Units against the input: resistance of the loop"
      aside={data && `${day(data.fromDay)} to ${day(data.day)}`}
    >
      <NotRead
        error={loop.error}
        title="The samples could not be fetched"
        kind="failed"
        onRetry={() => loop.refetch()}
      />
      {loop.isPending && <p role="status">Fetching three days of reports …</p>}
      {data && (
        <>
          <p className="font-medium">{data.words}</p>
          {data.points.length > 0 && (
            <>
              <div className="no-print mb-1 mt-2 flex justify-end gap-2">
                <Button className="!px-3" aria-pressed={asTable} onClick={() => setAsTable(!asTable)}>
                  {asTable ? 'Points' : 'Table'}
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
            <p className="mt-2 text-sm text-ink-2">It could be {listed(data.couldBe)}.</p>
          )}
          <p className="mt-2 text-xs text-ink-3">
            Each point: the sum of all unit outputs less the input’s voltage, gain errors taken out, over the
            string’s own current. The slope is the resistance of connectors and leads between them; the shaded
            wedge holds it 19 times in 20. Limit: {number(data.threshold.ohm, 1)} Ω ({data.threshold.source}).
            Connectors on the module side lie outside: no finding is not proof.
          </p>
        </>
      )}
    </Sheet>
  );
}
