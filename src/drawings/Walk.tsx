import { conditionOf, CONDITION_WORDS, type Condition, type DrawnSlot } from './condition';
import { listed } from './numbers';
import { SCREEN, type Paint } from './paint';

export interface WalkString {
  name: string;
  /** In position order; slots without a place on the roof are left out of the line. */
  slots: readonly (DrawnSlot & { roofX: number | null; roofY: number | null })[];
}
interface Props {
  /** Roof outline in metres, y to the north. */
  outline: readonly (readonly [number, number])[];
  /** The first is walked, others stand behind it in grey. */
  strings: readonly WalkString[];
  width?: number;
  paint?: Paint;
}

const MARKED: ReadonlySet<Condition> = new Set(['stuck', 'not_shutting_down', 'silent', 'unheard']);

/** A string's path over the roof, ticks for its units, only the exceptions marked: how a person finds position 9. */
export function Walk({ outline, strings, width = 680, paint = SCREEN }: Props) {
  const placed = strings.map((s) => ({
    name: s.name,
    slots: s.slots.flatMap((slot) =>
      slot.roofX === null || slot.roofY === null ? [] : [{ ...slot, x: slot.roofX, y: slot.roofY }],
    ),
  }));
  const all = [...outline.map(([x, y]) => ({ x, y })), ...placed.flatMap((s) => s.slots)];
  if (all.length === 0) return null;
  const west = Math.min(...all.map((p) => p.x));
  const east = Math.max(...all.map((p) => p.x));
  const south = Math.min(...all.map((p) => p.y));
  const north = Math.max(...all.map((p) => p.y));
  const margin = 28;
  const scale = (width - 2 * margin) / Math.max(1, east - west);
  const height = (north - south) * scale + 2 * margin;
  const at = (p: { x: number; y: number }) => ({
    x: margin + (p.x - west) * scale,
    y: margin + (north - p.y) * scale,
  });
  const words = placed
    .map((s) => {
      const marked = s.slots.filter((slot) => MARKED.has(conditionOf(slot)));
      return marked.length
        ? `${s.name}: ${listed(marked.map((m) => `${m.position} ${CONDITION_WORDS[conditionOf(m)]}`))}`
        : '';
    })
    .filter(Boolean)
    .join('. ');
  return (
    <svg
      viewBox={`0 0 ${width} ${height.toFixed(0)}`}
      width="100%"
      role="img"
      aria-label={`Roof with the path of ${listed(placed.map((s) => s.name))}. ${words}`}
      style={{ height: 'auto' }}
    >
      {outline.length > 2 && (
        <path
          d={`M${outline
            .map(([x, y]) => {
              const p = at({ x, y });
              return `${p.x.toFixed(1)} ${p.y.toFixed(1)}`;
            })
            .join('L')}Z`}
          fill={paint.sheet}
          stroke={paint.ink}
          strokeWidth="2"
        />
      )}
      <g transform={`translate(${width - margin - 22} ${margin + 12})`} fill={paint.ink}>
        <path d="M0 18 8 -2 16 18 8 13Z" />
        <text x="8" y="33" textAnchor="middle" fontSize="13" fontFamily="inherit">
          N
        </text>
      </g>
      {[...placed].reverse().map((s) => {
        const first = s === placed[0];
        const points = s.slots.map((slot) => ({ slot, ...at(slot) }));
        const start = points[0];
        return (
          <g key={s.name}>
            <path
              d={`M${points.map((p) => `${p.x.toFixed(1)} ${p.y.toFixed(1)}`).join('L')}`}
              fill="none"
              stroke={first ? paint.ink : paint.slate}
              strokeWidth={first ? 3 : 2}
              strokeLinejoin="round"
            />
            {points.map((p) => (
              <path
                key={p.slot.position}
                d={`M${p.x} ${p.y - 5}v10`}
                stroke={first ? paint.ink : paint.slate}
              />
            ))}
            {start && (
              <text
                x={start.x - 10}
                y={start.y + 4}
                textAnchor="end"
                fontSize="13"
                fontWeight="600"
                fontFamily="inherit"
                fill={first ? paint.ink : paint.ink2}
              >
                {s.name} −
              </text>
            )}
            {points
              .filter((p) => MARKED.has(conditionOf(p.slot)))
              .map((p) => {
                const condition = conditionOf(p.slot);
                const solid = condition === 'stuck' || condition === 'not_shutting_down';
                const fill =
                  condition === 'stuck'
                    ? paint.rust
                    : condition === 'not_shutting_down'
                      ? paint.crimson
                      : paint.sheet;
                return (
                  <g key={p.slot.position}>
                    <rect
                      x={p.x - 11}
                      y={p.y - 11}
                      width="22"
                      height="22"
                      fill={fill}
                      stroke={solid ? fill : paint.ink}
                      strokeDasharray={condition === 'unheard' ? '3 3' : undefined}
                    />
                    <text
                      x={p.x}
                      y={p.y + 5}
                      textAnchor="middle"
                      fontSize="13"
                      fontWeight="700"
                      fontFamily="inherit"
                      fill={solid ? paint.sheet : paint.ink}
                    >
                      {p.slot.position}
                    </text>
                  </g>
                );
              })}
          </g>
        );
      })}
    </svg>
  );
}
