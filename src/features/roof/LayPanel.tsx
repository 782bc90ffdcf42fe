import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { compass } from '../../domain/commissioning/roof/lay';
import type { RoofString } from '../../schemas/api/roof';
import { LABELS, RANGES, type LayingForm, type NumberKey, type ReadForm } from './laying-form';
import { layPanel } from '../../words/roof';

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
      title={layPanel.layAString}
      aside={layPanel.slotsModulesPlaneSurfaceTilt(string.slots.length, string.plane, string.surfaceTilt)}
    >
      <div className="grid grid-cols-2 gap-3">
        <Choice
          className="col-span-2"
          label={layPanel.string}
          value={string.id}
          options={strings.map((s) => ({
            value: s.id,
            label: `${s.name}: ${placed.has(s.id) ? layPanel.onTheRoof : layPanel.notOnTheRoof}`,
          }))}
          onChange={onString}
        />
        {field('startX', layPanel.orTapTheRoof)}
        {field('startY')}
        <Choice
          label={LABELS.direction}
          value={directions.includes(towards) ? String(towards) : 'other'}
          options={[
            ...directions.map((d, i) => ({
              value: String(d),
              label: i < 2 ? layPanel.dEaves(compass(d)) : compass(d),
            })),
            { value: 'other', label: layPanel.inDegrees },
          ]}
          onChange={(v) => set({ direction: v === 'other' ? String(Number(form.direction) + 5) : v })}
        />
        {directions.includes(towards) ? (
          <Choice
            label={layPanel.nextRowLiesTo}
            value={form.nextRow}
            options={(['right', 'left'] as const).map((side) => ({ value: side, label: hand(side) }))}
            onChange={(v) => set({ nextRow: v === 'left' ? 'left' : 'right' })}
          />
        ) : (
          field('direction', layPanel.fromNorthClockwise)
        )}
        {!directions.includes(towards) && (
          <Choice
            className="col-span-2"
            label={layPanel.nextRowLiesTo}
            value={form.nextRow}
            options={(['right', 'left'] as const).map((side) => ({ value: side, label: hand(side) }))}
            onChange={(v) => set({ nextRow: v === 'left' ? 'left' : 'right' })}
          />
        )}
        {field('perRow')}
        <div>
          <p className="mb-1 font-medium">{layPanel.modulesStand}</p>
          <Segmented
            label={layPanel.modulesStand}
            look="bold"
            value={form.orientation}
            options={[
              { value: 'portrait', label: layPanel.upright },
              { value: 'landscape', label: layPanel.across },
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
          {layPanel.serpentineEveryOtherRow}
        </label>
        <Field
          className="col-span-2"
          label={layPanel.countedFrom}
          value={form.from}
          placeholder={layPanel.compassEnd(compass(towards + 180))}
          maxLength={60}
          onChange={(event) => set({ from: event.target.value })}
          hint={laid[0] ? layPanel.positionIsThen(laid[0].slots[0]?.roofPlace) : undefined}
        />
        {field('strings', layPanel.eachBeginsOnThe)}
        <div className="self-start pt-6">
          <Button weight="primary" className="w-full" onClick={onLay}>
            {layPanel.layLaid1Laid(laid.length, string.name)}
          </Button>
        </div>
      </div>
      {laid.length > 1 && (
        <p className="mt-2 text-sm text-ink-2">{laid.map((l) => l.string.name).join(', ')}</p>
      )}
    </Sheet>
  );
}
