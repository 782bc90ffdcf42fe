import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { TimeChart } from '../../components/charts/TimeChart';
import { Notice } from '../../components/ui/Notice';
import { NotRead } from '../../components/ui/NotRead';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import type { StringPage, UnitQuantity } from '../../schemas/api/string';
import { UNITS_CHOSEN_MOST, type WorkbenchView } from '../../schemas/api/workbench-view';
import { unitsChart } from './history-model';
import { unitsCsvHref, unitsQuery, type UnitsView } from './queries';
import { unitsInAddress } from './view';
import { unitsSheet } from '../../words/strings';

const QUANTITIES: readonly { value: UnitQuantity; label: string }[] = [
  { value: 'voltage', label: unitsSheet.voltage },
  { value: 'current', label: unitsSheet.current },
  { value: 'temperature', label: unitsSheet.temperature },
  { value: 'power', label: unitsSheet.power },
];

interface Props {
  page: StringPage;
  view: WorkbenchView;
  /** Positions whose lines are drawn. */
  chosen: readonly number[];
  onView: (some: Partial<WorkbenchView>) => void;
  moment: number | null;
  onMoment: (at: number, done: boolean) => void;
}

/** Lines of chosen units over the time shown, eight at most. */
export default function UnitsSheet({ page, view, chosen, onView, moment, onMoment }: Props) {
  const { string } = page;
  const subject = unitsSheet.siteStringWhich(page.site.name, string.name);
  const asked: UnitsView = {
    quantity: view.unit,
    range: view.range === 'year' ? 'month' : view.range,
    on: view.on || null,
    positions: [...chosen].sort((a, b) => a - b).join(','),
  };
  const units = useQuery({ ...unitsQuery(string.id, asked), enabled: chosen.length > 0 });
  const tones = useMemo(
    () =>
      new Map(
        string.slots.flatMap((s): [number, 'rust' | 'crimson'][] =>
          s.verdict === 'not_shutting_down'
            ? [[s.position, 'crimson']]
            : s.verdict === 'stuck' || s.verdict === 'flapping' || s.verdict === 'late'
              ? [[s.position, 'rust']]
              : [],
        ),
      ),
    [string.slots],
  );
  const model = useMemo(
    () => (units.data && chosen.length > 0 ? unitsChart(units.data, subject, tones) : null),
    [units.data, chosen.length, subject, tones],
  );
  const toggle = (position: number) => {
    const next = chosen.includes(position) ? chosen.filter((p) => p !== position) : [...chosen, position];
    if (next.length <= UNITS_CHOSEN_MOST) onView({ units: unitsInAddress(next) });
  };
  const full = chosen.length >= UNITS_CHOSEN_MOST;
  return (
    <Sheet
      id="units-chosen"
      title={unitsSheet.chosenUnits}
      aside={
        <Segmented
          label={unitsSheet.quantityOfUnits}
          options={QUANTITIES}
          value={view.unit}
          onChange={(unit) => onView({ unit })}
        />
      }
    >
      <fieldset className="mb-2 flex flex-wrap items-center gap-1">
        <legend className="mb-1 text-sm text-ink-2">
          {unitsSheet.positionsAtMost(UNITS_CHOSEN_MOST)}
          {full && unitsSheet.takeOneOutTo}
        </legend>
        {string.slots
          .filter((s) => s.serial !== null)
          .map((s) => {
            const on = chosen.includes(s.position);
            return (
              <label
                key={s.position}
                title={s.serial ?? undefined}
                className={`target inline-flex min-w-[44px] items-center justify-center rounded border px-1.5 text-sm focus-within:outline focus-within:outline-2 focus-within:outline-petrol ${on ? 'border-ink bg-ink text-sheet' : 'border-rule text-ink-2'} ${!on && full ? 'cursor-not-allowed opacity-50' : 'cursor-pointer'}`}
              >
                <input
                  type="checkbox"
                  className="sr-only"
                  checked={on}
                  disabled={!on && full}
                  onChange={() => toggle(s.position)}
                />
                <span className="sr-only">{unitsSheet.position}</span>
                {s.position}
              </label>
            );
          })}
      </fieldset>
      <NotRead
        error={units.error}
        title={unitsSheet.theLinesCouldNot}
        kind="failed"
        onRetry={() => units.refetch()}
      />
      {chosen.length === 0 && (
        <Notice kind="empty" title={unitsSheet.noUnitIsChosen}>
          {unitsSheet.choosePositionsAboveOr}
        </Notice>
      )}
      {chosen.length > 0 && units.isPending && <p role="status">{unitsSheet.fetchingTheUnitsReports}</p>}
      {model && (
        <div className={units.isPlaceholderData ? 'opacity-60' : ''}>
          <TimeChart
            key={`${view.unit} ${model.from} ${model.to}`}
            model={model}
            height={320}
            fileName={`units-${view.unit}-${view.on || 'today'}`}
            csvHref={unitsCsvHref(string.id, asked)}
            moment={moment}
            onMoment={onMoment}
          />
          <p className="mt-1 text-sm text-ink-2">
            {units.data?.imported && unitsSheet.imported}
            {units.data?.resolution === 'quarter' &&
              (view.unit === 'temperature' ? unitsSheet.highestOf15Minutes : unitsSheet.meansOf15Minutes)}
            {view.range === 'year' && unitsSheet.singleUnitsAreKept}
            {units.data && units.data.moves.length > 0 && unitsSheet.beforeAMarkTheReadings}
            {chosen.some((p) => tones.get(p) === 'rust') && unitsSheet.rustStuckLateOr}
            {chosen.some((p) => tones.get(p) === 'crimson') && unitsSheet.crimsonNotShuttingDown}
          </p>
        </div>
      )}
    </Sheet>
  );
}
