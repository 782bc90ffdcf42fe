import { useId } from 'react';
import type { StringNow } from '../../schemas/api/now';
import { slotLabel, type SlotRef } from './evidence';
import { slotPicker } from '../../words/placements';

const SELECT = 'min-h-[44px] w-full rounded border border-rule bg-sheet px-2.5 text-[16px] text-ink';

interface Props {
  label: string;
  strings: readonly StringNow[];
  value: SlotRef | null;
  onChange: (value: SlotRef | null) => void;
  /** Serials that have answered; null: judged by their state. */
  heard?: ReadonlySet<string> | null;
  /** Slots offered first, as open: the rest follow below. */
  isOpen?: (slot: StringNow['slots'][number]) => boolean;
  error?: string | null;
}

/** A string and a position in it, as two lists. */
export function SlotPicker({ label, strings, value, onChange, heard = null, isOpen, error }: Props) {
  const id = useId();
  const string = strings.find((s) => s.id === value?.stringId);
  const open = string && isOpen ? string.slots.filter(isOpen) : [];
  const others = string ? string.slots.filter((s) => !open.includes(s)) : [];
  const option = (slot: StringNow['slots'][number]) => (
    <option key={slot.position} value={slot.position}>
      {slotLabel(slot, heard)}
    </option>
  );
  return (
    <fieldset aria-describedby={error ? `${id}-error` : undefined}>
      <legend className="mb-1 font-medium">{label}</legend>
      <div className="grid grid-cols-[110px_minmax(0,1fr)] gap-2">
        <select
          aria-label={slotPicker.labelString(label)}
          className={SELECT}
          value={value?.stringId ?? ''}
          onChange={(e) => onChange(e.target.value ? { stringId: e.target.value, position: 0 } : null)}
        >
          <option value="">{slotPicker.string}</option>
          {strings.map((s) => (
            <option key={s.id} value={s.id}>
              {s.name}
            </option>
          ))}
        </select>
        <select
          aria-label={slotPicker.labelPosition(label)}
          className={SELECT}
          disabled={!string}
          value={value?.position ?? 0}
          onChange={(e) => value && onChange({ ...value, position: Number(e.target.value) })}
        >
          <option value={0}>{slotPicker.positionFrom}</option>
          {open.length > 0 ? (
            <>
              <optgroup label={slotPicker.withoutAUnitThat}>{open.map(option)}</optgroup>
              <optgroup label={slotPicker.replacingAUnitThat}>{others.map(option)}</optgroup>
            </>
          ) : (
            others.map(option)
          )}
        </select>
      </div>
      {error && (
        <p id={`${id}-error`} role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {error}
        </p>
      )}
    </fieldset>
  );
}
