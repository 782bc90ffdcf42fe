/** The path through points already in the drawing's px; it breaks off where y is null, and goes on behind. */
export function gappedLine(points: readonly (readonly [x: number, y: number | null])[]): string {
  let d = '';
  let drawing = false;
  for (const [x, y] of points) {
    if (y !== null) d += `${drawing ? 'L' : 'M'}${x.toFixed(1)} ${y.toFixed(1)}`;
    drawing = y !== null;
  }
  return d;
}
