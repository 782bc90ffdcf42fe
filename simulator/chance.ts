/**
 * Deterministic draws. Nothing in the simulator uses a running generator: each draw is a hash of the seed
 * and of what it is for, so that a reading does not depend on how often or in what order others were taken.
 */

/** A whole-number key of a text, for draws about a thing with a name (FNV-1a, 32 bits). */
export function keyOf(text: string): number {
  let h = 0x811c9dc5;
  for (let i = 0; i < text.length; i++) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193);
  return h >>> 0;
}

/** Mixes two 32-bit numbers (the finaliser of MurmurHash3, public domain). */
export function mix(a: number, b: number): number {
  let h = Math.imul(a ^ 0x9e3779b9, 0x85ebca6b) ^ Math.imul(b + 0x7f4a7c15, 0xc2b2ae35);
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}

/** Uniform in [0, 1) for this key and index. */
export const uniform = (key: number, index: number): number => mix(key, index) / 4_294_967_296;

/** Standard normal for this key and index (Box & Muller 1958). */
export function normal(key: number, index: number): number {
  const u = 1 - uniform(key, index * 2);
  return Math.sqrt(-2 * Math.log(u)) * Math.cos(2 * Math.PI * uniform(key, index * 2 + 1));
}

/** Standard normal cut at ±`limit`. */
export const normalWithin = (key: number, index: number, limit: number): number =>
  Math.max(-limit, Math.min(limit, normal(key, index)));

/** Smooth noise in [−1, 1] over a line: cubic blend between draws at whole numbers. */
export function smoothNoise(key: number, x: number): number {
  const i = Math.floor(x);
  const f = x - i;
  const a = uniform(key, i) * 2 - 1;
  return a + (uniform(key, i + 1) * 2 - 1 - a) * f * f * (3 - 2 * f);
}
