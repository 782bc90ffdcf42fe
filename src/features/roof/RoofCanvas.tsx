import { useEffect, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react';
import { SCREEN } from '../../drawings/paint';
import { across, sheetOf, spanOf, type Sheet } from '../../drawings/walk-geometry';
import type { RoofPoint } from '../../domain/commissioning/roof/lay';
import type { Outline } from '../../domain/commissioning/roof/outline';
import { toDecimetre } from './draft';
import { roofCanvas } from '../../words/roof';

export interface DrawnPath {
  id: string;
  name: string;
  spots: readonly (RoofPoint & { position: number })[];
  /** chosen: the string that is worked on; other: what else lies there; planned: not laid yet. */
  look: 'chosen' | 'other' | 'planned';
}
interface Props {
  outline: Outline;
  paths: readonly DrawnPath[];
  /** Where the next string is to start; null: nowhere yet. */
  start: RoofPoint | null;
  mode: 'outline' | 'strings' | 'look';
  /** Somebody points at the roof: metres. */
  onPoint: (point: RoofPoint) => void;
  /** `joined`: on its way, one step with the move before. */
  onMove: (index: number, point: RoofPoint, joined: boolean) => void;
  onRemove: (index: number) => void;
}
const WIDTH = 1000;
const INK = { chosen: SCREEN.ink, other: SCREEN.slate, planned: SCREEN.petrol } as const;
/** Half of a finger's target, in CSS pixels. */
const FINGER_PX = 22;

/** The roof from above, y to the north: its outline, and the strings as lines from their negative end. */
export function RoofCanvas({ outline, paths, start, mode, onPoint, onMove, onRemove }: Props) {
  const svg = useRef<SVGSVGElement>(null);
  const [dragged, setDragged] = useState<{
    index: number;
    moved: boolean;
    sheet: Sheet;
    west: number;
    north: number;
  } | null>(null);
  const [shownWidth, setShownWidth] = useState(700);
  useEffect(() => {
    const element = svg.current;
    if (!element) return;
    const watch = new ResizeObserver(() => setShownWidth(element.clientWidth || 700));
    watch.observe(element);
    return () => watch.disconnect();
  }, []);
  const points = [
    ...outline.map(([x, y]) => ({ x, y })),
    ...paths.flatMap((p) => p.spots),
    ...(start ? [start] : []),
  ];
  const span = spanOf(points) ?? { west: 0, east: 20, south: 0, north: 12 };
  // room around it to set points in; a single point is no span
  const around = mode === 'outline' ? Math.max(2, 0.08 * (span.east - span.west)) : 1;
  const wide = {
    west: span.west - around,
    east: Math.max(span.east + around, span.west + 12),
    south: span.south - around,
    north: Math.max(span.north + around, span.south + 7),
  };
  // room for the names of strings that begin at the edge
  const px = WIDTH / shownWidth;
  const margin = 10 + 26 * px;
  // the sheet must not move under a finger that drags on it
  const sheet = dragged?.sheet ?? sheetOf(wide, WIDTH, margin);
  const origin = dragged ?? { west: wide.west, north: wide.north };
  const line = (list: readonly RoofPoint[]): string =>
    list
      .map((p) => sheet.at(p))
      .map((p) => `${p.x.toFixed(1)} ${p.y.toFixed(1)}`)
      .join('L');
  const metres = (event: PointerEvent | React.MouseEvent): RoofPoint | null => {
    const matrix = svg.current?.getScreenCTM();
    if (!matrix) return null;
    const at = new DOMPoint(event.clientX, event.clientY).matrixTransform(matrix.inverse());
    return {
      x: toDecimetre((at.x - margin) / sheet.scale + origin.west),
      y: toDecimetre(origin.north - (at.y - margin) / sheet.scale),
    };
  };
  const byKey = (index: number) => (event: KeyboardEvent) => {
    const point = outline[index];
    if (!point) return;
    const step = event.shiftKey ? 1 : 0.1;
    const [dx, dy] = (
      { ArrowLeft: [-step, 0], ArrowRight: [step, 0], ArrowUp: [0, step], ArrowDown: [0, -step] } as const
    )[event.key as 'ArrowLeft'] ?? [0, 0];
    if (event.key === 'Delete' || event.key === 'Backspace') onRemove(index);
    else if (dx !== 0 || dy !== 0)
      onMove(index, { x: toDecimetre(point[0] + dx), y: toDecimetre(point[1] + dy) }, event.repeat);
    else return;
    event.preventDefault();
  };
  /** Room below for what says how large it is and where north is. */
  const foot = 34 * px;
  const metre = 5 * Math.ceil((wide.east - wide.west) / 50);
  return (
    <svg
      ref={svg}
      viewBox={`0 0 ${WIDTH} ${(sheet.height + foot).toFixed(0)}`}
      width="100%"
      role="group"
      aria-label={roofCanvas.roofFromAboveWith(
        outline.length,
        paths.filter((p) => p.spots.length > 0).length,
      )}
      className={`block select-none bg-film ${mode === 'look' ? '' : 'cursor-crosshair'}`}
      style={{ height: 'auto', touchAction: 'manipulation' }}
      onClick={(event) => {
        if (mode === 'look' || (event.target as Element).closest('[data-handle]')) return;
        const point = metres(event);
        if (point) onPoint(point);
      }}
    >
      {outline.length > 0 && (
        <path
          d={`M${line(outline.map(([x, y]) => ({ x, y })))}${outline.length > 2 ? 'Z' : ''}`}
          fill={outline.length > 2 ? SCREEN.sheet : 'none'}
          stroke={SCREEN.ink}
          strokeWidth={2 * px}
        />
      )}
      {paths.map((p) => (
        <StringPath key={`${p.id} ${p.look}`} path={p} sheet={sheet} px={px} />
      ))}
      {paths.map((p) => (
        <StringName key={`${p.id} ${p.look}`} path={p} sheet={sheet} px={px} />
      ))}
      {start && (
        <g
          transform={`translate(${sheet.at(start).x} ${sheet.at(start).y})`}
          stroke={SCREEN.petrol}
          strokeWidth={2 * px}
        >
          <circle r={9 * px} fill="none" />
          <path d={`M${-14 * px} 0h${28 * px}M0 ${-14 * px}v${28 * px}`} />
        </g>
      )}
      {mode === 'outline' &&
        outline.map(([x, y], index) => {
          const at = sheet.at({ x, y });
          return (
            <g key={index} transform={`translate(${at.x.toFixed(1)} ${at.y.toFixed(1)})`} data-handle>
              <circle r={6 * px} fill={SCREEN.sheet} stroke={SCREEN.ink} strokeWidth={2 * px} />
              <text
                x={10 * px}
                y={-10 * px}
                fontSize={13 * px}
                fontWeight="600"
                fill={SCREEN.ink2}
                fontFamily="inherit"
                aria-hidden="true"
              >
                {index + 1}
              </text>
              <circle
                r={FINGER_PX * px}
                fill="transparent"
                tabIndex={0}
                role="button"
                aria-label={roofCanvas.pointAtEastNorth(index, x, y)}
                className="cursor-grab outline-offset-0"
                style={{ touchAction: 'none' }}
                onKeyDown={byKey(index)}
                onPointerDown={(event) => {
                  event.currentTarget.setPointerCapture(event.pointerId);
                  setDragged({ index, moved: false, sheet, west: origin.west, north: origin.north });
                }}
                onPointerMove={(event) => {
                  if (dragged?.index !== index) return;
                  const point = metres(event);
                  if (!point || (point.x === x && point.y === y)) return;
                  onMove(index, point, dragged.moved);
                  setDragged({ ...dragged, moved: true });
                }}
                onPointerUp={() => setDragged(null)}
                onPointerCancel={() => setDragged(null)}
              />
            </g>
          );
        })}
      <g
        transform={`translate(${WIDTH - margin - 18 * px} ${sheet.height + 2 * px}) scale(${0.8 * px})`}
        fill={SCREEN.ink}
        aria-hidden="true"
      >
        <path d="M0 18 8 -2 16 18 8 13Z" />
        <text x="8" y="33" textAnchor="middle" fontSize="13" fontFamily="inherit">
          N
        </text>
      </g>
      <g
        transform={`translate(${margin} ${sheet.height + 14 * px})`}
        stroke={SCREEN.ink}
        strokeWidth={1.5 * px}
        aria-hidden="true"
      >
        <path d={`M0 ${-4 * px}v${4 * px}h${metre * sheet.scale}v${-4 * px}`} fill="none" />
        <text
          x={metre * sheet.scale + 6 * px}
          y={2 * px}
          fontSize={12 * px}
          stroke="none"
          fill={SCREEN.ink2}
          fontFamily="inherit"
        >
          {metre} m
        </text>
      </g>
    </svg>
  );
}

function StringPath({ path, sheet, px }: { path: DrawnPath; sheet: Sheet; px: number }) {
  const { spots, look } = path;
  if (spots.length === 0) return null;
  const ink = INK[look];
  const at = spots.map((s) => sheet.at(s));
  return (
    <g>
      <path
        d={`M${at.map((p) => `${p.x.toFixed(1)} ${p.y.toFixed(1)}`).join('L')}`}
        fill="none"
        stroke={ink}
        strokeWidth={(look === 'other' ? 1.5 : 2.5) * px}
        strokeDasharray={look === 'planned' ? `${6 * px} ${4 * px}` : undefined}
        strokeLinejoin="round"
      />
      {at.map((p, i) => {
        const tick = across(at[i - 1], p, at[i + 1]);
        return (
          <path
            key={spots[i]?.position}
            d={`M${p.x - 5 * px * tick.x} ${p.y - 5 * px * tick.y}l${10 * px * tick.x} ${10 * px * tick.y}`}
            stroke={ink}
            strokeWidth={px}
          />
        );
      })}
    </g>
  );
}

/** Its name where it begins, above all lines: other strings run through the room beside it. */
function StringName({ path, sheet, px }: { path: DrawnPath; sheet: Sheet; px: number }) {
  const { spots, look, name } = path;
  const [first] = spots;
  const last = spots.at(-1);
  if (!first || !last) return null;
  const begins = sheet.at(first);
  const ends = sheet.at(last);
  return (
    <g
      fontSize={12 * px}
      fontFamily="inherit"
      fontWeight="600"
      fill={look === 'other' ? SCREEN.ink2 : INK[look]}
      stroke={SCREEN.sheet}
      strokeWidth={4 * px}
      paintOrder="stroke"
    >
      <text x={begins.x - 3 * px} y={begins.y - 8 * px}>
        {name} −
      </text>
      {look !== 'other' && spots.length > 1 && (
        <text x={ends.x + 3 * px} y={ends.y - 8 * px} textAnchor="end">
          {last.position}
        </text>
      )}
    </g>
  );
}
