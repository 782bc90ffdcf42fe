import { groupedBy } from '../domain/grouped-by';
import { combGeometry, type Tooth } from './comb-geometry';
import { CONDITION_WORDS, type DrawnSlot } from './condition';
import { Hatch } from './Hatch';
import { listed } from './numbers';
import { SCREEN, type Paint } from './paint';
import { comb } from '../words/drawings-strings';

interface Props {
  /** Unique in the document. */
  id: string;
  slots: readonly DrawnSlot[];
  /** What there is room for, px; the comb takes what it needs of it. */
  width?: number;
  height?: number;
  paint?: Paint;
}

/** "14 units: 12 passing; 5 and 9 stuck." */
export function combInWords(slots: readonly DrawnSlot[], teeth: readonly Tooth[]): string {
  const parts = [...groupedBy(teeth, (t) => t.condition)].map(([condition, alike]) =>
    condition === 'passing' || alike.length === teeth.length || alike.length > 8
      ? `${alike.length} ${CONDITION_WORDS[condition]}`
      : `${listed(alike.map((t) => t.position))} ${CONDITION_WORDS[condition]}`,
  );
  return comb.slotsPositionsParts(slots.length, parts.join('; '));
}

function ToothMark({
  tooth,
  base,
  id,
  paint,
  roomy,
}: {
  tooth: Tooth;
  base: number;
  id: string;
  paint: Paint;
  roomy: boolean;
}) {
  const { x, width, height, condition } = tooth;
  const y = base - height;
  switch (condition) {
    case 'empty':
      return <path d={`M${x} ${base - 0.5}h${width}`} stroke={paint.rule} />;
    case 'unheard':
      return width >= 5 ? (
        <rect
          x={x + 0.5}
          y={y + 0.5}
          width={width - 1}
          height={height - 1}
          fill="none"
          stroke={paint.ink3}
          strokeDasharray="2 2"
        />
      ) : (
        <path d={`M${x + 0.5} ${y}V${base}`} stroke={paint.ink3} strokeDasharray="2 2" />
      );
    case 'silent':
      return (
        <g>
          <rect x={x} y={y} width={width} height={height} fill={`url(#${id}-hatch)`} />
          {width >= 5 && (
            <rect
              x={x + 0.5}
              y={y + 0.5}
              width={width - 1}
              height={height - 1}
              fill="none"
              stroke={paint.slate}
            />
          )}
        </g>
      );
    case 'stuck':
      return (
        <g fill={paint.rust}>
          <rect x={x} y={y} width={width} height={height} />
          {roomy && <path d={`M${x + width / 2 - 3} ${base - 13}h6l-3 5z`} />}
        </g>
      );
    case 'not_shutting_down':
      return (
        <g>
          <rect x={x} y={0} width={width} height={base} fill={paint.crimson} />
          {roomy && <path d={`M${x + width / 2} ${base / 2 - 4}l3.5 4-3.5 4-3.5-4z`} fill={paint.sheet} />}
        </g>
      );
    case 'shutdown':
      return <rect x={x} y={y} width={width} height={height} fill={paint.plum} />;
    case 'dark':
      return (
        <path d={`M${x} ${base - 1.5}h${width}`} stroke={paint.slate} strokeWidth="3" strokeDasharray="2 1" />
      );
    case 'untold':
      return (
        <rect
          x={x + 0.5}
          y={y + 0.5}
          width={Math.max(1, width - 1)}
          height={height - 1}
          fill={paint.petrolWash}
          stroke={paint.petrol}
          strokeWidth={width >= 5 ? 1 : 0.5}
        />
      );
    case 'passing':
      return tooth.assumed && width >= 5 ? (
        <rect
          x={x + 0.5}
          y={y + 0.5}
          width={width - 1}
          height={height - 1}
          fill={paint.petrolWash}
          stroke={paint.petrol}
          strokeDasharray="3 2"
        />
      ) : (
        <rect x={x} y={y} width={width} height={height} fill={paint.petrol} opacity="0.82" />
      );
  }
}

/** The comb: a string in one row, one bar a unit. Height, hatch and outline carry the state, not hue alone. */
export function Comb({ id, slots, width = 252, height = 22, paint = SCREEN }: Props) {
  const g = combGeometry(slots, width, height);
  return (
    <svg
      width={g.width}
      height={height}
      viewBox={`0 0 ${g.width} ${height}`}
      role="img"
      aria-label={combInWords(slots, g.teeth)}
      style={{ maxWidth: '100%' }}
      shapeRendering="crispEdges"
    >
      <defs>
        <Hatch id={`${id}-hatch`} colour={paint.slate} step={4} />
      </defs>
      {g.teeth.map((tooth) => (
        <ToothMark key={tooth.position} tooth={tooth} base={height} id={id} paint={paint} roomy={g.roomy} />
      ))}
    </svg>
  );
}
