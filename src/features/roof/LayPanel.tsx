import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { compass } from '../../domain/commissioning/roof/lay';
import type { RoofString } from '../../schemas/api/roof';
import { LABELS, RANGES, type LayingForm, type NumberKey, type ReadForm } from './laying-form';

interface Props {
  strings: readonly RoofString[];
  string: RoofString;
  /** Strings that have a place already. */
  placed: ReadonlySet<string>;
  form: LayingForm;
  read: ReadForm;
  /** Faults are shown once somebody has tried. */
  tried: boolean;
  onString: (id: string) => void;
  onForm: (form: LayingForm) => void;
  onLay: () => void;
}

/** How a string runs over the roof, row by row. */
export function LayPanel({ strings, string, placed, form, read, tried, onString, onForm, onLay }: Props) {
  const set = (some: Partial<LayingForm>) => onForm({ ...form, ...some });
  const field = (key: NumberKey, hint?: string) => (
    <Field
      label={LABELS[key]}
      inputMode="decimal"
      unit={'unit' in RANGES[key] ? (RANGES[key] as { unit: string }).unit : undefined}
      value={form[key]}
      hint={hint}
      error={tried ? read.faults?.[key] : undefined}
      onChange={(event) => set({ [key]: event.target.value })}
    />
  );
  const eaves = Math.round((string.surfaceAzimuth + 270) % 360);
  const winds = [0, 45, 90, 135, 180, 225, 270, 315];
  const directions = [
    eaves,
    (eaves + 180) % 360,
    ...winds.filter((w) => w !== eaves && w !== (eaves + 180) % 360),
  ];
  const towards = Number(form.direction);
  const hand = (side: 'left' | 'right') => compass(towards + (side === 'right' ? 90 : -90));
  const laid = read.laid ?? [];
  return (
    <Sheet
      id="lay"
      title="Lay a string"
      aside={`${string.slots.length} modules, ${string.plane}, ${string.surfaceTilt}°`}
    >
      <div className="grid grid-cols-2 gap-3">
        <Choice
          className="col-span-2"
          label="String"
          value={string.id}
          options={strings.map((s) => ({
            value: s.id,
            label: `${s.name}: ${placed.has(s.id) ? 'on the roof' : 'not on the roof yet'}`,
          }))}
          onChange={onString}
        />
        {field('startX', 'or tap the roof')}
        {field('startY')}
        <Choice
          label={LABELS.direction}
          value={directions.includes(towards) ? String(towards) : 'other'}
          options={[
            ...directions.map((d, i) => ({
              value: String(d),
              label: i < 2 ? `${compass(d)} (eaves)` : compass(d),
            })),
            { value: 'other', label: 'in degrees' },
          ]}
          onChange={(v) => set({ direction: v === 'other' ? String(Number(form.direction) + 5) : v })}
        />
        {directions.includes(towards) ? (
          <Choice
            label="Next row lies to the"
            value={form.nextRow}
            options={(['right', 'left'] as const).map((side) => ({ value: side, label: hand(side) }))}
            onChange={(v) => set({ nextRow: v === 'left' ? 'left' : 'right' })}
          />
        ) : (
          field('direction', 'from north, clockwise')
        )}
        {!directions.includes(towards) && (
          <Choice
            className="col-span-2"
            label="Next row lies to the"
            value={form.nextRow}
            options={(['right', 'left'] as const).map((side) => ({ value: side, label: hand(side) }))}
            onChange={(v) => set({ nextRow: v === 'left' ? 'left' : 'right' })}
          />
        )}
        {field('perRow')}
        <div>
          <p className="mb-1 font-medium">Modules stand</p>
          <Segmented
            label="Modules stand"
            look="bold"
            value={form.orientation}
            options={[
              { value: 'portrait', label: 'upright' },
              { value: 'landscape', label: 'across' },
            ]}
            onChange={(orientation) => set({ orientation })}
          />
        </div>
        {field('gapAlong')}
        {field('gapAcross')}
        <label className="col-span-2 flex min-h-[44px] items-center gap-3 text-[15px]">
          <input
            type="checkbox"
            className="h-5 w-5"
            checked={form.serpentine}
            onChange={(event) => set({ serpentine: event.target.checked })}
          />
          Serpentine: every other row runs back
        </label>
        <Field
          className="col-span-2"
          label="Counted from"
          value={form.from}
          placeholder={`${compass(towards + 180)} end`}
          maxLength={60}
          onChange={(event) => set({ from: event.target.value })}
          hint={laid[0] ? `Position 1 is then: ${laid[0].slots[0]?.roofPlace ?? ''}.` : undefined}
        />
        {field('strings', 'each begins on the row after the last')}
        <div className="self-start pt-6">
          <Button weight="primary" className="w-full" onClick={onLay}>
            Lay {laid.length > 1 ? `${laid.length} strings` : string.name}
          </Button>
        </div>
      </div>
      {laid.length > 1 && (
        <p className="mt-2 text-sm text-ink-2">{laid.map((l) => l.string.name).join(', ')}</p>
      )}
    </Sheet>
  );
}
