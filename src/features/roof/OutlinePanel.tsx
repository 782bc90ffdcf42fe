import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { outlineArea, outlineFault, type Outline } from '../../domain/commissioning/roof/outline';
import { number } from '../../drawings/numbers';
import { typedNumber } from '../../schemas/typed-number';
import { rectangle } from './draft';

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
      title="Outline"
      aside={
        outline.length > 2 && !fault
          ? `${number(outlineArea(outline))} m² in plan`
          : `${outline.length} points`
      }
    >
      {fault && (
        <p role="alert" className="mb-3 font-medium text-rust-ink">
          {fault}
        </p>
      )}
      {outline.length === 0 && (
        <p className="mb-3 text-ink-2">
          Tap the corners of the roof on the drawing, or begin with a rectangle. North is up; 0, 0 is a corner
          that you choose.
        </p>
      )}
      <RectangleForm onMake={onOutline} replaces={outline.length > 0} />
      {outline.length > 0 && (
        <table className="mt-4 w-full border-collapse text-left">
          <caption className="sr-only">Points of the outline in metres</caption>
          <thead>
            <tr className="border-b border-rule text-sm text-ink-2">
              <th scope="col" className="w-10 py-1 font-medium">
                No.
              </th>
              <th scope="col" className="py-1 font-medium">
                East (m)
              </th>
              <th scope="col" className="py-1 font-medium">
                North (m)
              </th>
              <th scope="col" className="w-12">
                <span className="sr-only">Remove</span>
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
                      label={`Point ${i + 1}, ${axis === 0 ? 'east' : 'north'}`}
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
                    aria-label={`Remove point ${i + 1}`}
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
    const width = typedNumber(text.width, 'Width', { min: 1, max: 1000, unit: 'm' });
    const depth = typedNumber(text.depth, 'Depth', { min: 1, max: 1000, unit: 'm' });
    const turned = typedNumber(text.turned, 'Turned', { min: -360, max: 360, unit: '°' });
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
        {replaces ? 'Begin anew with a rectangle' : 'A rectangle'}
      </summary>
      <div className="grid grid-cols-2 gap-3 pt-1">
        {field('width', 'Width', 'm')}
        {field('depth', 'Depth', 'm')}
        {field('turned', 'Turned', '°', 'clockwise from east')}
        <div className="self-end pb-6">
          <Button className="w-full" onClick={make}>
            Draw it
          </Button>
        </div>
      </div>
    </details>
  );
}
