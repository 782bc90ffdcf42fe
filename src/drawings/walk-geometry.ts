/** Where things of a walk lie on paper: the roof's metres (y to the north) to the drawing's units. Pure. */

export interface Point {
  x: number;
  y: number;
}
export interface Span {
  west: number;
  east: number;
  south: number;
  north: number;
}

export function spanOf(points: readonly Point[]): Span | null {
  if (points.length === 0) return null;
  return {
    west: Math.min(...points.map((p) => p.x)),
    east: Math.max(...points.map((p) => p.x)),
    south: Math.min(...points.map((p) => p.y)),
    north: Math.max(...points.map((p) => p.y)),
  };
}

/** Metres of roof around what is walked, so that one sees where it is. */
const AROUND = 3;
/** Narrower than this is not drawn closer, m. */
const NARROWEST = 12;

/** What is shown: what is walked with some roof around it, within the whole; the whole where that is hardly more. */
export function focusOn(whole: Span, walked: Span | null): Span {
  if (walked === null) return whole;
  const widen = Math.max(AROUND, (NARROWEST - (walked.east - walked.west)) / 2);
  const shown = {
    west: Math.max(whole.west, walked.west - widen),
    east: Math.min(whole.east, walked.east + widen),
    south: Math.max(whole.south, walked.south - AROUND),
    north: Math.min(whole.north, walked.north + AROUND),
  };
  return shown.east - shown.west > 0.8 * (whole.east - whole.west) ? whole : shown;
}

export interface Sheet {
  width: number;
  height: number;
  /** Drawing units a metre. */
  scale: number;
  at: (p: Point) => Point;
}

/** A drawing as wide as given, with a margin all round; wider at the left for names, at the top for what stands there. */
export function sheetOf(span: Span, width: number, margin: number, left = margin, top = margin): Sheet {
  const scale = (width - left - margin) / Math.max(1, span.east - span.west);
  return {
    width,
    height: (span.north - span.south) * scale + top + margin,
    scale,
    at: (p) => ({ x: left + (p.x - span.west) * scale, y: top + (span.north - p.y) * scale }),
  };
}

/** Across the path at a point: the direction of a tick, of length 1. */
export function across(before: Point | undefined, here: Point, after: Point | undefined): Point {
  const from = before ?? here;
  const to = after ?? here;
  const length = Math.hypot(to.x - from.x, to.y - from.y);
  // where the path turns round, the tick stands on the row that leads there
  if (length < 1e-6) return { x: 0, y: 1 };
  const along = { x: (to.x - from.x) / length, y: (to.y - from.y) / length };
  if (before && after && Math.abs(along.x) > 0.1 && Math.abs(along.y) > 0.1) return { x: 0, y: 1 };
  return { x: -along.y, y: along.x };
}

/** A step so many times longer than the usual one is a lead that crosses the roof, not a row of modules. */
const CROSSING = 2.5;

/** A string's path as rows of modules and the leads between them. */
export function rowsOf(points: readonly Point[]): { rows: Point[][]; leads: [Point, Point][] } {
  const steps = points.slice(1).map((p, i) => Math.hypot(p.x - points[i]!.x, p.y - points[i]!.y));
  const usual = [...steps].sort((a, b) => a - b)[steps.length >> 1] ?? 0;
  const rows: Point[][] = [];
  const leads: [Point, Point][] = [];
  points.forEach((p, i) => {
    const last = rows.at(-1);
    if (last === undefined || steps[i - 1]! > CROSSING * usual) {
      if (last) leads.push([points[i - 1]!, p]);
      rows.push([p]);
    } else last.push(p);
  });
  return { rows, leads };
}
