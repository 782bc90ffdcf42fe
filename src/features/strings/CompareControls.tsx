import { Choice } from '../../components/ui/Choice';
import type { StringPage } from '../../schemas/api/string';
import type { WorkbenchView } from '../../schemas/api/workbench';
import { compareControls } from '../../words/string-history';

interface Props {
  page: StringPage;
  view: WorkbenchView;
  today: string;
  onChange: (some: Partial<WorkbenchView>) => void;
}

/** What the string is held against: its siblings, another string, another day of its own. */
export function CompareControls({ page, view, today, onChange }: Props) {
  const { previous, next } = page.neighbours;
  const near = [previous, next].filter((s) => s !== null && !page.siblings.some((o) => o.id === s.id));
  const others = [...page.siblings, ...near].flatMap((s) => (s ? [s] : []));
  return (
    <div className="no-print mb-2 flex flex-wrap items-center gap-x-4 gap-y-1">
      <Choice
        inline
        label={compareControls.siblings}
        value={view.siblings}
        disabled={page.siblings.length === 0}
        options={[
          {
            value: 'middle',
            label: page.siblings.length === 0 ? compareControls.noneOnThisPlane : compareControls.theirMiddle,
          },
          { value: 'each', label: compareControls.eachOf(page.siblings.length) },
          { value: 'off', label: compareControls.notShown },
        ]}
        onChange={(siblings) => onChange({ siblings: siblings as WorkbenchView['siblings'] })}
      />
      <Choice
        inline
        label={compareControls.layOver}
        value={view.beside}
        options={[
          { value: '', label: compareControls.noString },
          ...others.map((s) => ({ value: s.id, label: compareControls.stringName(s.name) })),
        ]}
        onChange={(beside) => onChange({ beside, day: '', ...(beside === '' ? { difference: '' } : {}) })}
      />
      <label className="flex items-center gap-2 text-sm text-ink-2">
        {compareControls.orTheDay}
        <input
          type="date"
          value={view.day}
          max={today}
          disabled={view.range === 'year'}
          onChange={(event) =>
            onChange({
              day: event.target.value,
              beside: '',
              ...(event.target.value === '' ? { difference: '' } : {}),
            })
          }
          className="target rounded border border-rule bg-sheet px-2 text-[15px] text-ink"
        />
      </label>
      <label className="target inline-flex items-center gap-2 text-sm text-ink-2">
        <input
          type="checkbox"
          checked={view.difference === 'yes'}
          disabled={view.beside === '' && view.day === ''}
          onChange={(event) => onChange({ difference: event.target.checked ? 'yes' : '' })}
          className="h-5 w-5 accent-[var(--ink)]"
        />
        {compareControls.difference}
      </label>
    </div>
  );
}
