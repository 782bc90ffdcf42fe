import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { HeatStrip } from '../../components/charts/HeatStrip';
import type { HeatModel } from '../../components/charts/heat';
import { Notice } from '../../components/ui/Notice';
import { NotRead } from '../../components/ui/NotRead';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { withQuery } from '../../lib/api';
import { longDate } from '../../drawings/times';
import type { StringPage, UnitQuantity } from '../../schemas/api/string';
import type { StringHeat, WorkbenchView } from '../../schemas/api/workbench';
import { paths } from '../../schemas/paths';
import { heatQuery } from './queries';

const QUANTITIES: readonly { value: UnitQuantity; label: string }[] = [
  { value: 'voltage', label: 'Voltage' },
  { value: 'current', label: 'Current' },
  { value: 'temperature', label: 'Temperature' },
  { value: 'power', label: 'Power' },
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
      title: `${page.site.name}, string ${string.name}: ${heat.data.quantity} of every unit`,
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
      title="Every unit over the day"
      aside={
        <div className="flex flex-wrap items-center gap-x-4">
          <Segmented
            label="Quantity of the strip"
            options={QUANTITIES}
            value={view.heat}
            onChange={(quantity) => onView({ heat: quantity })}
          />
          <Segmented
            label="Scale of the strip"
            options={[
              { value: 'middle', label: 'Against the middle' },
              { value: 'figures', label: 'Figures' },
            ]}
            value={view.scale}
            onChange={(scale) => onView({ scale })}
          />
        </div>
      }
    >
      <NotRead
        error={heat.error}
        title="The day could not be fetched"
        kind="failed"
        onRetry={() => heat.refetch()}
      />
      {heat.isPending && <p role="status">Fetching the day of every unit …</p>}
      {model && heat.data && (
        <>
          <p className="mb-2 text-sm text-ink-2">
            {longDate(heat.data.from * 1000, heat.data.timeZone)}, positions downward, means of{' '}
            {heat.data.stepS / 60} minutes
            {heat.data.side === 'module' && heat.data.quantity === 'voltage' && ', module side'}. A tap shows
            the staircase of that moment and the unit’s line.
          </p>
          {model.at.length === 0 ? (
            <Notice kind="empty" title="No unit reported on this day">
              Choose another day in the history above.
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
