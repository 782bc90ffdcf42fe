import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { HeatStrip } from '../../components/charts/HeatStrip';
import type { HeatModel } from '../../components/charts/heat';
import { Notice } from '../../components/ui/Notice';
import { NotRead } from '../../components/ui/NotRead';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { withQuery } from '../../lib/api';
import type { StringPage, UnitQuantity } from '../../schemas/api/string';
import type { StringHeat, WorkbenchView } from '../../schemas/api/workbench';
import { paths } from '../../schemas/paths';
import { heatQuery } from './queries';
import { heatSheet } from '../../words/string-history';

const QUANTITIES: readonly { value: UnitQuantity; label: string }[] = [
  { value: 'voltage', label: heatSheet.voltage },
  { value: 'current', label: heatSheet.current },
  { value: 'temperature', label: heatSheet.temperature },
  { value: 'power', label: heatSheet.power },
];
const DIGITS: Record<UnitQuantity, number> = { voltage: 1, current: 2, temperature: 0, power: 0 };
/** Below this the middle of a step says nothing: dusk. */
const LEAST: Record<UnitQuantity, number> = { voltage: 5, current: 0.3, temperature: 10, power: 5 };

/** From the first to the last step in which anybody reported, an hour around it. */
function lit(heat: StringHeat): { from: number; to: number } {
  const first = heat.at[0];
  const last = heat.at.at(-1);
  if (first === undefined || last === undefined) return { from: heat.from, to: heat.to };
  const from = Math.max(heat.from, Math.floor((first - 1800) / 3600) * 3600);
  return { from, to: Math.min(heat.to, Math.max(last + heat.stepS + 1800, from + 6 * 3600)) };
}

interface Props {
  page: StringPage;
  view: WorkbenchView;
  onView: (some: Partial<WorkbenchView>) => void;
  moment: number | null;
  /** A moment and the unit at it. */
  onChoose: (at: number, position: number) => void;
}

/** A day of every unit as a strip. */
export default function HeatSheet({ page, view, onView, moment, onChoose }: Props) {
  const { string } = page;
  const heat = useQuery(heatQuery(string.id, view.heat, view.on || null));
  const model = useMemo((): HeatModel | null => {
    if (!heat.data) return null;
    return {
      title: heatSheet.stringOfEveryUnit(page.site.name, string.name, heat.data.quantity),
      unit: heat.data.unit,
      digits: DIGITS[heat.data.quantity],
      timeZone: heat.data.timeZone,
      ...lit(heat.data),
      stepS: heat.data.stepS,
      at: heat.data.at,
      rows: heat.data.rows.filter((r) => r.serial !== null || r.values.some((v) => v !== null)),
      scale: view.scale,
    };
  }, [heat.data, view.scale, page.site.name, string.name]);
  return (
    <Sheet
      id="heat"
      title={heatSheet.everyUnitOverThe}
      aside={
        <div className="flex flex-wrap items-center gap-x-4">
          <Segmented
            label={heatSheet.quantityOfTheStrip}
            options={QUANTITIES}
            value={view.heat}
            onChange={(quantity) => onView({ heat: quantity })}
          />
          <Segmented
            label={heatSheet.scaleOfTheStrip}
            options={[
              { value: 'middle', label: heatSheet.againstTheMiddle },
              { value: 'figures', label: heatSheet.figures },
            ]}
            value={view.scale}
            onChange={(scale) => onView({ scale })}
          />
        </div>
      }
    >
      <NotRead
        error={heat.error}
        title={heatSheet.theDayCouldNot}
        kind="failed"
        onRetry={() => heat.refetch()}
      />
      {heat.isPending && <p role="status">{heatSheet.fetchingTheDayOf}</p>}
      {model && heat.data && (
        <>
          <p className="mb-2 text-sm text-ink-2">
            {heatSheet.positionsDownwardMeansOf(heat.data.from, heat.data.timeZone, heat.data.stepS)}
            {heat.data.side === 'module' && heat.data.quantity === 'voltage' && heatSheet.moduleSide}
            {heat.data.imported && heatSheet.imported}
            {heatSheet.aTapShowsThe}
          </p>
          {model.at.length === 0 ? (
            <Notice kind="empty" title={heatSheet.noUnitReportedOn}>
              {heatSheet.chooseAnotherDayIn}
            </Notice>
          ) : (
            <HeatStrip
              model={model}
              least={LEAST[view.heat]}
              moment={moment}
              onChoose={(cell) => onChoose(cell.at, cell.position)}
              csvHref={withQuery(paths.api.stringHeatCsv(string.id), {
                quantity: view.heat,
                on: view.on || null,
              })}
            />
          )}
        </>
      )}
    </Sheet>
  );
}
