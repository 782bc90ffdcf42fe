/**
 * Minimum of a function of a few numbers by the simplex method (J.A. Nelder, R. Mead, Computer J. 7 (1965) 308), restarted
 * once round its own result. No derivatives, no randomness: the same start always gives the same answer.
 */
export function minimise(
  f: (x: readonly number[]) => number,
  start: readonly number[],
  spread: readonly number[],
): { at: readonly number[]; value: number } {
  const first = descend(f, start, spread);
  return descend(f, first.at, spread);
}

const MAX_STEPS = 800;

interface Vertex {
  at: readonly number[];
  value: number;
}

function descend(
  f: (x: readonly number[]) => number,
  start: readonly number[],
  spread: readonly number[],
): Vertex {
  const vertex = (at: readonly number[]): Vertex => ({ at, value: f(at) });
  const corners = [
    vertex(start),
    ...start.map((_, axis) => vertex(start.map((x, i) => (i === axis ? x + (spread[i] ?? 1) : x)))),
  ];
  const n = start.length;
  for (let step = 0; step < MAX_STEPS; step += 1) {
    corners.sort((a, b) => a.value - b.value);
    const best = corners[0]!;
    const worst = corners[n]!;
    const size = Math.max(...best.at.map((x, i) => Math.abs(x - worst.at[i]!)));
    if (size < 1e-10 && worst.value - best.value < 1e-12) break;
    const centre = start.map(
      (_, i) => corners.slice(0, n).reduce((sum, corner) => sum + corner.at[i]!, 0) / n,
    );
    const along = (factor: number) => vertex(centre.map((c, i) => c + factor * (worst.at[i]! - c)));
    const reflected = along(-1);
    if (reflected.value < best.value) {
      const expanded = along(-2);
      corners[n] = expanded.value < reflected.value ? expanded : reflected;
    } else if (reflected.value < corners[n - 1]!.value) {
      corners[n] = reflected;
    } else {
      const contracted = along(reflected.value < worst.value ? -0.5 : 0.5);
      if (contracted.value < Math.min(reflected.value, worst.value)) corners[n] = contracted;
      else {
        for (let i = 1; i <= n; i += 1) {
          corners[i] = vertex(corners[i]!.at.map((x, axis) => (x + best.at[axis]!) / 2));
        }
      }
    }
  }
  return corners.reduce((a, b) => (b.value < a.value ? b : a));
}
