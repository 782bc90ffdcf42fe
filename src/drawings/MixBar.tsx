import { Hatch } from './Hatch';
import { MIX_WORDS, mixParts, mixWidths, type Mix, type MixPart } from './mix';
import { number } from './numbers';
import { SCREEN, type Paint } from './paint';
import { mixBar } from '../words/drawings-strings';

interface Props {
  /** Unique in the document. */
  id: string;
  counts: Mix;
  width?: number;
  height?: number;
  paint?: Paint;
}

function PartMark({
  part,
  x,
  width,
  height,
  id,
  paint,
}: {
  part: MixPart;
  x: number;
  width: number;
  height: number;
  id: string;
  paint: Paint;
}) {
  const box = { x, y: 0, width, height };
  const outline = { x: x + 0.5, y: 0.5, width: Math.max(1, width - 1), height: height - 1 };
  switch (part) {
    case 'not_shutting_down':
      return <rect {...box} fill={paint.crimson} />;
    case 'passing':
      return <rect {...box} fill={paint.petrol} opacity="0.82" />;
    case 'stuck':
      return <rect x={x} y={height - 5} width={width} height={5} fill={paint.rust} />;
    case 'shutdown':
      return <rect x={x} y={height - 5} width={width} height={5} fill={paint.plum} />;
    case 'silent':
      return <rect {...box} fill={`url(#${id}-hatch)`} />;
    case 'unheard':
      return <rect {...outline} fill="none" stroke={paint.ink3} strokeDasharray="2 2" />;
    case 'dark':
      return (
        <path
          d={`M${x} ${height - 2.5}h${width}`}
          stroke={paint.slate}
          strokeWidth="5"
          strokeDasharray="3 2"
        />
      );
    case 'untold':
      return <rect {...outline} fill={paint.petrolWash} stroke={paint.petrol} />;
  }
}

/** A site's units by state: the comb, widened to proportions. */
export function MixBar({ id, counts, width = 190, height = 16, paint = SCREEN }: Props) {
  const parts = mixParts(counts);
  const widths = mixWidths(parts, width);
  let x = 0;
  const placed = parts.map((p, i) => {
    const at = x;
    const w = widths[i] ?? 0;
    x += w + 1;
    return { ...p, x: at, width: w };
  });
  return (
    <svg
      width={width}
      height={height}
      viewBox={`0 0 ${width} ${height}`}
      role="img"
      aria-label={mixBar.unitsByState(
        counts.units,
        parts.map((p) => `${number(p.units)} ${MIX_WORDS[p.part]}`).join(', '),
      )}
      style={{ maxWidth: '100%' }}
    >
      <defs>
        <Hatch id={`${id}-hatch`} colour={paint.slate} step={5} />
      </defs>
      {placed.map((p) => (
        <PartMark key={p.part} part={p.part} x={p.x} width={p.width} height={height} id={id} paint={paint} />
      ))}
    </svg>
  );
}
