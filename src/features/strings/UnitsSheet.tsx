import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { TimeChart } from '../../components/charts/TimeChart';
import { Button } from '../../components/ui/Button';
import { NotRead } from '../../components/ui/NotRead';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import type { StringPage, UnitQuantity } from '../../schemas/api/string';
import { unitsChart } from './history-model';
import { unitsCsvHref, unitsQuery, type UnitsView } from './queries';

const QUANTITIES: readonly { value: UnitQuantity; label: string }[] = [
  { value: 'voltage', label: 'Voltage' },
  { value: 'current', label: 'Current' },
  { value: 'temperature', label: 'Temperature' },
  { value: 'power', label: 'Power' },
];

interface Props {
  page: StringPage;
  /** Positions that stand out; null: those that are in trouble. */
  chosen: ReadonlySet<number> | null;
  onChoose: (chosen: ReadonlySet<number>) => void;
}

/** Every unit's line over today, the chosen ones in front. Fetched when asked for. */
export function UnitsSheet({ page, chosen, onChoose }: Props) {
  const { string } = page;
  const subject = `${page.site.name}, string ${string.name}`;
  const [open, setOpen] = useState(false);
  const [view, setView] = useState<UnitsView>({ quantity: 'voltage', on: null });
  const units = useQuery({ ...unitsQuery(string.id, view), enabled: open });
  const tones = useMemo(
    () =>
      new Map(
        string.slots.flatMap((s): [number, 'rust' | 'crimson'][] =>
          s.verdict === 'stuck' || s.verdict === 'flapping' || s.verdict === 'late'
            ? [[s.position, 'rust']]
            : s.verdict === 'not_shutting_down'
              ? [[s.position, 'crimson']]
              : [],
        ),
      ),
    [string.slots],
  );
  const inFront = useMemo(() => chosen ?? new Set(tones.keys()), [chosen, tones]);
  const model = useMemo(
    () => (units.data ? unitsChart(units.data, subject, inFront, tones) : null),
    [units.data, subject, inFront, tones],
  );
  const toggle = (position: number) => {
    const next = new Set(inFront);
    if (!next.delete(position)) next.add(position);
    onChoose(next);
  };
  return (
    <Sheet
      id="units-today"
      title="Single units, today"
      aside={
        open && (
          <Segmented
            label="Quantity"
            options={QUANTITIES}
            value={view.quantity}
            onChange={(quantity) => setView({ ...view, quantity })}
          />
        )
      }
    >
      {!open && (
        <Button onClick={() => setOpen(true)}>Show the lines of all {string.counts.units} units</Button>
      )}
      <NotRead
        error={units.error}
        title="The lines could not be fetched"
        kind="failed"
        onRetry={() => units.refetch()}
      />
      {open && units.isPending && <p role="status">Fetching the day’s reports …</p>}
      {model && (
        <>
          <fieldset className="mb-2 flex flex-wrap items-center gap-1">
            <legend className="sr-only">Positions in front</legend>
            {string.slots
              .filter((s) => s.serial !== null)
              .map((s) => (
                <label
                  key={s.position}
                  className={`target inline-flex min-w-[36px] cursor-pointer items-center justify-center rounded border px-1.5 text-sm focus-within:outline focus-within:outline-2 focus-within:outline-petrol ${inFront.has(s.position) ? 'border-ink bg-ink text-sheet' : 'border-rule text-ink-2'}`}
                >
                  <input
                    type="checkbox"
                    className="sr-only"
                    checked={inFront.has(s.position)}
                    onChange={() => toggle(s.position)}
                  />
                  <span className="sr-only">Position </span>
                  {s.position}
                </label>
              ))}
          </fieldset>
          <TimeChart
            model={model}
            height={320}
            fileName={`units-${view.quantity}`}
            csvHref={unitsCsvHref(string.id, view)}
          />
        </>
      )}
    </Sheet>
  );
}
