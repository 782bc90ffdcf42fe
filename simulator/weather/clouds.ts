import { mix } from '../chance';

/** A field of clouds that the wind carries along. Metres, seconds. */
export interface CloudField {
  key: number;
  atS: number;
  /** Share of the sky covered, 0 … 1. */
  cover: number;
  velocityX: number;
  velocityY: number;
}

const LARGE = 900; // m
const SMALL = 170; // m
const PER_UNIT = 1 / 4_294_967_296;

function valueNoise(key: number, x: number, y: number): number {
  const ix = Math.floor(x);
  const iy = Math.floor(y);
  const fx = x - ix;
  const fy = y - iy;
  const sx = fx * fx * (3 - 2 * fx);
  const sy = fy * fy * (3 - 2 * fy);
  const left = mix(key, ix);
  const right = mix(key, ix + 1);
  const a = mix(left, iy) * PER_UNIT;
  const b = mix(right, iy) * PER_UNIT;
  const c = mix(left, iy + 1) * PER_UNIT;
  const d = mix(right, iy + 1) * PER_UNIT;
  const low = a + (b - a) * sx;
  return low + (c + (d - c) * sx - low) * sy;
}

/** Share of the beam that reaches a place (m): 1 in clear sky, a little more at a cloud's bright edge. */
export function cloudAt(field: CloudField, x: number, y: number): number {
  // The field is kept within some thousands of kilometres so that it does not lose its fineness.
  const travelled = field.atS % 1_000_000;
  const px = x - field.velocityX * travelled;
  const py = y - field.velocityY * travelled;
  const noise =
    0.68 * valueNoise(field.key, px / LARGE, py / LARGE) +
    0.32 * valueNoise(field.key + 1, px / SMALL, py / SMALL);
  // The noise is roughly logistic about one half: this threshold leaves `cover` of it above.
  const threshold = 0.5 + 0.095 * Math.log((1 - field.cover) / field.cover);
  const u = Math.max(0, Math.min(1, (noise - threshold + 0.05) / 0.1));
  const density = u * u * (3 - 2 * u);
  const edge = density > 0.02 && density < 0.4 ? 0.04 : 0;
  return 1 + edge - density * 0.86;
}
