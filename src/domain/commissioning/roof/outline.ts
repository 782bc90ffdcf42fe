import { outlineSaid } from '../../../words/domain-roof';
import type { RoofPoint } from './lay';

/** The outline of a roof: a closed line through points in metres, y to the north. */
export type Outline = readonly (readonly [number, number])[];

export const OUTLINE_POINTS_MAX = 100;
export const ROOF_MAX_M = 2000;

/** Twice the signed area. */
const doubleArea = (outline: Outline): number =>
  outline.reduce((sum, [x, y], i) => {
    const [nextX, nextY] = outline[(i + 1) % outline.length] ?? [x, y];
    return sum + x * nextY - nextX * y;
  }, 0);

/** m² in plan. */
export const outlineArea = (outline: Outline): number => Math.abs(doubleArea(outline)) / 2;

type Pair = readonly [number, number];
const side = ([ax, ay]: Pair, [bx, by]: Pair, [cx, cy]: Pair): number =>
  Math.sign((bx - ax) * (cy - ay) - (by - ay) * (cx - ax));

const cross = (a: Pair, b: Pair, c: Pair, d: Pair): boolean =>
  side(a, b, c) * side(a, b, d) < 0 && side(c, d, a) * side(c, d, b) < 0;

/** What is wrong with an outline, in words with a remedy; null: nothing. No points at all is no outline, and right. */
export function outlineFault(outline: Outline): string | null {
  if (outline.length === 0) return null;
  if (outline.length < 3) return outlineSaid.fewPoints;
  if (outline.length > OUTLINE_POINTS_MAX) return outlineSaid.manyPoints(OUTLINE_POINTS_MAX);
  if (outline.some((p) => p.some((v) => !Number.isFinite(v) || Math.abs(v) > ROOF_MAX_M)))
    return outlineSaid.farPoints(ROOF_MAX_M);
  const n = outline.length;
  for (let i = 0; i < n; i++)
    for (let j = i + 2; j < n; j++) {
      const [a, b, c, d] = [outline[i], outline[(i + 1) % n], outline[j], outline[(j + 1) % n]];
      if (a && b && c && d && (j + 1) % n !== i && cross(a, b, c, d))
        return outlineSaid.crossing(i + 1, j + 1);
    }
  if (outlineArea(outline) < 1) return outlineSaid.small;
  return null;
}

/** Whether a point lies within the outline (even-odd rule); true where there is no outline. */
export function within(outline: Outline, { x, y }: RoofPoint): boolean {
  if (outline.length < 3) return true;
  let inside = false;
  outline.forEach(([ax, ay], i) => {
    const [bx, by] = outline[(i + 1) % outline.length] ?? [ax, ay];
    if (ay > y !== by > y && x < ((bx - ax) * (y - ay)) / (by - ay) + ax) inside = !inside;
  });
  return inside;
}
