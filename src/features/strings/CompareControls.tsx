import { Choice } from '../../components/ui/Choice';
import type { StringPage } from '../../schemas/api/string';
import type { WorkbenchView } from '../../schemas/api/workbench';

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
        label="Siblings"
        value={view.siblings}
        disabled={page.siblings.length === 0}
        options={[
          { value: 'middle', label: page.siblings.length === 0 ? 'none on this plane' : 'their middle' },
          { value: 'each', label: `each of ${page.siblings.length}` },
          { value: 'off', label: 'not shown' },
        ]}
        onChange={(siblings) => onChange({ siblings: siblings as WorkbenchView['siblings'] })}
      />
      <Choice
        inline
        label="Lay over"
        value={view.beside}
        options={[
          { value: '', label: 'no string' },
          ...others.map((s) => ({ value: s.id, label: `string ${s.name}` })),
        ]}
        onChange={(beside) => onChange({ beside, day: '', ...(beside === '' ? { difference: '' } : {}) })}
      />
      <label className="flex items-center gap-2 text-sm text-ink-2">
        or the day
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
        Difference
      </label>
    </div>
  );
}
