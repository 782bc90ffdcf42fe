import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { outlineArea, outlineFault, type Outline } from '../../domain/commissioning/roof/outline';
import { typedNumber } from '../../schemas/typed-number';
import { rectangle } from './draft';
import { outlinePanel } from '../../words/roof';

interface Props {
  outline: Outline;
  onOutline: (outline: Outline) => void;
}
const METRES = { min: -2000, max: 2000, unit: 'm' };

/** The outline in figures: a rectangle to begin with, then each point. */
export function OutlinePanel({ outline, onOutline }: Props) {
  const fault = outlineFault(outline);
  return (
    <Sheet
      id="outline"
      title={outlinePanel.outline}
      aside={
        outline.length > 2 && !fault
          ? outlinePanel.inPlan(outlineArea(outline))
          : outlinePanel.outlinePoints(outline.length)
      }
    >
      {fault && (
        <p role="alert" className="mb-3 font-medium text-rust-ink">
          {fault}
        </p>
      )}
      {outline.length === 0 && <p className="mb-3 text-ink-2">{outlinePanel.tapTheCornersOf}</p>}
      <RectangleForm onMake={onOutline} replaces={outline.length > 0} />
      {outline.length > 0 && (
        <table className="mt-4 w-full border-collapse text-left">
          <caption className="sr-only">{outlinePanel.pointsOfTheOutline}</caption>
          <thead>
            <tr className="border-b border-rule text-sm text-ink-2">
              <th scope="col" className="w-10 py-1 font-medium">
                {outlinePanel.no}
              </th>
              <th scope="col" className="py-1 font-medium">
                {outlinePanel.eastM}
              </th>
              <th scope="col" className="py-1 font-medium">
                {outlinePanel.northM}
              </th>
              <th scope="col" className="w-12">
                <span className="sr-only">{outlinePanel.remove}</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {outline.map((point, i) => (
              <tr key={`${i} ${point.join(' ')}`}>
                <th scope="row" className="font-medium">
                  {i + 1}
                </th>
                {([0, 1] as const).map((axis) => (
                  <td key={axis} className="py-0.5 pr-2">
                    <MetresInput
                      label={outlinePanel.pointIi(i, axis)}
                      value={point[axis]}
                      onValue={(v) =>
                        onOutline(
                          outline.map((p, n): readonly [number, number] =>
                            n === i ? (axis === 0 ? [v, p[1]] : [p[0], v]) : p,
                          ),
                        )
                      }
                    />
                  </td>
                ))}
                <td>
                  <button
                    type="button"
                    className="target text-ink-2 hover:text-ink"
                    aria-label={outlinePanel.removePoint(i)}
                    onClick={() => onOutline(outline.filter((_, n) => n !== i))}
                  >
                    ×
                  </button>
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </Sheet>
  );
}

/** A number of metres that is taken when it is one; what is typed stays until then. */
export function MetresInput({
  label,
  value,
  onValue,
}: {
  label: string;
  value: number | null;
  onValue: (value: number) => void;
}) {
  const [typed, setTyped] = useState<string | null>(null);
  const read = typed === null ? null : typedNumber(typed, label, METRES);
  const take = () => {
    if (read?.value !== null && read?.value !== undefined) {
      if (read.value !== value) onValue(read.value);
      setTyped(null);
    }
  };
  return (
    <>
      <input
        aria-label={label}
        inputMode="decimal"
        value={typed ?? (value === null ? '' : String(value))}
        onChange={(event) => setTyped(event.target.value)}
        onBlur={take}
        onKeyDown={(event) => {
          if (event.key === 'Enter') take();
        }}
        aria-invalid={read?.fault ? true : undefined}
        title={read?.fault ?? undefined}
        className={`min-h-[44px] w-full min-w-[72px] rounded border bg-sheet px-2 text-[16px] ${read?.fault ? 'border-rust' : 'border-rule'}`}
      />
      {read?.fault && (
        <p role="alert" className="text-sm text-rust-ink">
          {read.fault}
        </p>
      )}
    </>
  );
}

function RectangleForm({ onMake, replaces }: { onMake: (outline: Outline) => void; replaces: boolean }) {
  const [text, setText] = useState({ width: '', depth: '', turned: '0' });
  const [faults, setFaults] = useState<Record<string, string | null>>({});
  const make = () => {
    const width = typedNumber(text.width, outlinePanel.width, { min: 1, max: 1000, unit: 'm' });
    const depth = typedNumber(text.depth, outlinePanel.depth, { min: 1, max: 1000, unit: 'm' });
    const turned = typedNumber(text.turned, outlinePanel.turned, { min: -360, max: 360, unit: '°' });
    setFaults({ width: width.fault, depth: depth.fault, turned: turned.fault });
    if (width.value !== null && depth.value !== null && turned.value !== null)
      onMake(rectangle(width.value, depth.value, turned.value));
  };
  const field = (key: keyof typeof text, label: string, unit: string, hint?: string) => (
    <Field
      label={label}
      unit={unit}
      inputMode="decimal"
      value={text[key]}
      hint={hint}
      error={faults[key]}
      onChange={(event) => setText({ ...text, [key]: event.target.value })}
    />
  );
  return (
    <details open={!replaces}>
      <summary className="target flex cursor-pointer items-center text-[15px] text-petrol">
        {replaces ? outlinePanel.beginAnewWithA : outlinePanel.aRectangle}
      </summary>
      <div className="grid grid-cols-2 gap-3 pt-1">
        {field('width', outlinePanel.width, 'm')}
        {field('depth', outlinePanel.depth, 'm')}
        {field('turned', outlinePanel.turned, '°', outlinePanel.clockwiseFromEast)}
        <div className="self-end pb-6">
          <Button className="w-full" onClick={make}>
            {outlinePanel.drawIt}
          </Button>
        </div>
      </div>
    </details>
  );
}
