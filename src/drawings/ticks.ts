/** Round values from 0 up to at least `max`, about `count` of them: 0, 100, 200 … */
export function ticksTo(max: number, count = 6): number[] {
  if (!(max > 0)) return [0, 1];
  const rough = max / count;
  const unit = 10 ** Math.floor(Math.log10(rough));
  const step = ([1, 2, 5, 10].find((m) => m * unit >= rough) ?? 10) * unit;
  const last = Math.ceil(max / step - 1e-9);
  return Array.from({ length: last + 1 }, (_, i) => i * step);
}
