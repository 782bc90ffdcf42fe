/** rad per degree */
export const RADIANS = Math.PI / 180;

export const sinDeg = (degrees: number): number => Math.sin(degrees * RADIANS);
export const cosDeg = (degrees: number): number => Math.cos(degrees * RADIANS);
export const tanDeg = (degrees: number): number => Math.tan(degrees * RADIANS);
export const acosDeg = (cosine: number): number => Math.acos(Math.min(1, Math.max(-1, cosine))) / RADIANS;
export const asinDeg = (sine: number): number => Math.asin(Math.min(1, Math.max(-1, sine))) / RADIANS;
export const atan2Deg = (y: number, x: number): number => Math.atan2(y, x) / RADIANS;

/** An angle brought into [0, 360). */
export function wrap360(degrees: number): number {
  const turned = degrees % 360;
  return turned < 0 ? turned + 360 : turned;
}

/** An angle brought into [−180, 180). */
export function wrap180(degrees: number): number {
  return wrap360(degrees + 180) - 180;
}
