/**
 * The one way a physical function refuses an argument: a RangeError that names the parameter, what was given and what
 * is allowed. NaN and infinities are always refused, so that no NaN ever travels on.
 */
export function within(name: string, value: number, min: number, max: number, unit: string): void {
  if (!(value >= min && value <= max)) {
    throw new RangeError(`${name} must be between ${min} and ${max} ${unit}, but is ${value}`);
  }
}

/** Refuses anything but a finite number above zero (and at most `max`). */
export function positive(name: string, value: number, max: number, unit: string): void {
  if (!(value > 0 && value <= max)) {
    throw new RangeError(`${name} must be above 0 and at most ${max} ${unit}, but is ${value}`);
  }
}

/** Refuses anything but a whole number between `min` and `max`. */
export function wholeWithin(name: string, value: number, min: number, max: number): void {
  if (!Number.isInteger(value) || value < min || value > max) {
    throw new RangeError(`${name} must be a whole number between ${min} and ${max}, but is ${value}`);
  }
}
