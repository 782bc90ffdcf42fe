import { conditionOf, CONDITION_WORDS, type Condition, type DrawnSlot } from './condition';
import { listed } from './numbers';
import { SCREEN, type Paint } from './paint';
import { across, focusOn, rowsOf, sheetOf, spanOf, type Point } from './walk-geometry';
import { walk } from '../words/drawings-strings';

export interface WalkedString {
  name: string;
  /** In position order; slots without a place on the roof are left out of the line. */
  slots: readonly (DrawnSlot & { roofX: number | null; roofY: number | null })[];
}
interface Props {
  /** Roof outline in metres, y to the north. */
  outline: readonly (readonly [number, number])[];
  strings: readonly WalkedString[];
  /** Names of the strings that are walked: in ink, with their ends named. The others stand behind. */
  walked: ReadonlySet<string>;
  /** Marked slots as "B3-5"; absent: every exception of the strings that are walked. */
  marked?: ReadonlySet<string>;
  /** Marked slots that are done: drawn with a tick. */
  done?: ReadonlySet<string>;
  /** Stops in the order of the path, to draw it. */
  route?: readonly Point[];
  /** Draws closer, on the part of the roof where the walk is. */
  close?: boolean;
  width?: number;
  paint?: Paint;
}

const EXCEPTIONS: ReadonlySet<Condition> = new Set([
  'stuck',
  'not_shutting_down',
  'silent',
  'unheard',
  'empty',
]);
const TEXT = { fontFamily: 'inherit', fontWeight: 600 } as const;
/** Room at the left for the names of strings, drawing units. */
const NAMES = 46;
/** And at the top for the arrow to the north. */
const NORTH = 34;
const round = (n: number): string => n.toFixed(1);
const lineOf = (points: readonly Point[]): string =>
  `M${points.map((p) => `${round(p.x)} ${round(p.y)}`).join('L')}`;

interface Mark {
  position: number;
  condition: Condition;
  at: Point;
  done: boolean;
}

function MarkBox({ mark, paint, size }: { mark: Mark; paint: Paint; size: number }) {
  const { condition, at } = mark;
  const fill =
    condition === 'stuck' ? paint.rust : condition === 'not_shutting_down' ? paint.crimson : paint.sheet;
  const solid = fill !== paint.sheet;
  return (
    <g opacity={mark.done ? 0.55 : undefined}>
      <rect
        x={at.x - size / 2}
        y={at.y - size / 2}
        width={size}
        height={size}
        fill={fill}
        stroke={solid ? fill : paint.ink}
        strokeWidth="1.5"
        strokeDasharray={condition === 'unheard' || condition === 'empty' ? '3 2.5' : undefined}
      />
      {condition === 'silent' && (
        <path
          d={`M${at.x - size / 2} ${at.y + size / 2}l${size} ${-size}`}
          stroke={paint.slate}
          strokeWidth="1"
        />
      )}
      <text
        x={at.x}
        y={at.y + size * 0.22}
        textAnchor="middle"
        fontSize={size * 0.62}
        fill={solid ? paint.sheet : paint.ink}
        {...TEXT}
        fontWeight="700"
      >
        {mark.position}
      </text>
      {mark.done && (
        <path
          d={`M${at.x - size * 0.4} ${at.y - size * 0.75}l${size * 0.25} ${size * 0.25} ${size * 0.5} ${-size * 0.5}`}
          fill="none"
          stroke={paint.ink}
          strokeWidth="2"
        />
      )}
    </g>
  );
}

/** Strings' paths over the roof, ticks for their units, only the exceptions marked: how a person finds position 9. */
export function Walk({
  outline,
  strings,
  walked,
  marked,
  done,
  route = [],
  close = false,
  width = 680,
  paint = SCREEN,
}: Props) {
  const placed = strings.map((s) => ({
    name: s.name,
    lead: walked.has(s.name),
    slots: s.slots.flatMap((slot) =>
      slot.roofX === null || slot.roofY === null ? [] : [{ slot, at: { x: slot.roofX, y: slot.roofY } }],
    ),
  }));
  const whole = spanOf([
    ...outline.map(([x, y]) => ({ x, y })),
    ...placed.flatMap((s) => s.slots.map((p) => p.at)),
  ]);
  if (whole === null) return null;
  const margin = outline.length > 2 ? 14 : 34;
  const lead = placed.filter((s) => s.lead);
  const shown = close ? focusOn(whole, spanOf(lead.flatMap((s) => s.slots.map((p) => p.at)))) : whole;
  const sheet = sheetOf(shown, width, margin, NAMES, NORTH);
  // a module is about a metre and a sixth wide: marks may not cover their neighbours' numbers
  const size = Math.max(19, Math.min(24, sheet.scale * 1.1));
  const font = width < 480 ? 12 : 13;
  const isMarked = (name: string, slot: DrawnSlot): boolean =>
    marked ? marked.has(`${name}-${slot.position}`) : walked.has(name) && EXCEPTIONS.has(conditionOf(slot));
  const marksOf = (s: (typeof placed)[number]): Mark[] =>
    s.slots
      .filter((p) => isMarked(s.name, p.slot))
      .map((p) => ({
        position: p.slot.position,
        condition: conditionOf(p.slot),
        at: sheet.at(p.at),
        done: done?.has(`${s.name}-${p.slot.position}`) ?? false,
      }));
  // nothing of a walked string lies just left of it: its name stands there
  const drawnAt = lead.flatMap((s) => s.slots.map((p) => sheet.at(p.at)));
  const free = (p: Point): boolean =>
    !drawnAt.some((q) => Math.abs(q.y - p.y) < 8 && q.x < p.x - 1 && q.x > p.x - NAMES);
  const words = lead
    .map((s) => {
      const marks = marksOf(s);
      return marks.length
        ? `${s.name}: ${listed(marks.map((m) => `${m.position} ${CONDITION_WORDS[m.condition]}`))}`
        : '';
    })
    .filter(Boolean)
    .join('. ');
  const clip = `walk-${width}-${close ? 'close' : 'whole'}`;
  return (
    <svg
      viewBox={`0 0 ${width} ${sheet.height.toFixed(0)}`}
      width="100%"
      role="img"
      aria-label={walk.roofWithThePath(listed(lead.map((s) => s.name)), words)}
      style={{ height: 'auto' }}
    >
      <clipPath id={clip}>
        <rect x="0" y="0" width={width} height={sheet.height} />
      </clipPath>
      <g clipPath={`url(#${clip})`}>
        {outline.length > 2 && (
          <path
            d={`${lineOf(outline.map(([x, y]) => sheet.at({ x, y })))}Z`}
            fill={paint.sheet}
            stroke={paint.ink}
            strokeWidth="2"
          />
        )}
        {placed
          .filter((s) => !s.lead)
          .flatMap((s) =>
            rowsOf(s.slots.map((p) => sheet.at(p.at))).rows.map((row) => (
              <path
                key={`${s.name} ${lineOf(row)}`}
                d={lineOf(row)}
                fill="none"
                stroke={paint.rule}
                strokeWidth="1.5"
              />
            )),
          )}
        {lead.map((s) => {
          const points = s.slots.map((p) => sheet.at(p.at));
          const path = rowsOf(points);
          const [first] = points;
          const last = points.at(-1);
          return (
            <g key={s.name}>
              {path.leads.map(([from, to]) => (
                <path
                  key={lineOf([from, to])}
                  d={lineOf([from, to])}
                  fill="none"
                  stroke={paint.ink3}
                  strokeDasharray="1 3"
                />
              ))}
              {path.rows.map((row) => (
                <path
                  key={lineOf(row)}
                  d={lineOf(row)}
                  fill="none"
                  stroke={paint.ink}
                  strokeWidth="2.5"
                  strokeLinejoin="round"
                />
              ))}
              {points.map((p, i) => {
                const t = across(points[i - 1], p, points[i + 1]);
                return (
                  <path
                    key={s.slots[i]?.slot.position}
                    d={`M${round(p.x - 5 * t.x)} ${round(p.y - 5 * t.y)}l${round(10 * t.x)} ${round(10 * t.y)}`}
                    stroke={paint.ink}
                    strokeWidth="1.2"
                  />
                );
              })}
              {first && (
                <text
                  x={free(first) ? first.x - 7 : first.x - 2}
                  y={free(first) ? first.y + 4 : first.y - 9}
                  textAnchor={free(first) ? 'end' : 'start'}
                  fontSize={font}
                  fill={paint.ink}
                  stroke={paint.sheet}
                  strokeWidth="4"
                  paintOrder="stroke"
                  {...TEXT}
                >
                  {s.name} −
                </text>
              )}
              {last && points.length > 3 && (
                <text
                  x={last.x + 2}
                  y={last.y - 9}
                  textAnchor="end"
                  fontSize={font}
                  fill={paint.ink}
                  {...TEXT}
                >
                  +
                </text>
              )}
            </g>
          );
        })}
        {route.length > 1 && (
          <path
            d={lineOf(route.map((p) => sheet.at(p)))}
            fill="none"
            stroke={paint.petrol}
            strokeWidth="1.5"
            strokeDasharray="2 4"
          />
        )}
        {placed.flatMap((s) =>
          marksOf(s).map((mark) => (
            <MarkBox key={`${s.name}-${mark.position}`} mark={mark} paint={paint} size={size} />
          )),
        )}
      </g>
      <g transform={`translate(${width - margin - 36} 4)`} fill={paint.ink}>
        <path d="M0 20 8 2 16 20 8 15.5Z" />
        <text x="22" y="17" fontSize="13" fontFamily="inherit">
          N
        </text>
      </g>
    </svg>
  );
}
