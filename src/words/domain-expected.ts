import type { ExpectedFrom } from '../domain/output/expected';

/** What an expectation was learned from. @see ExpectedFrom */
export const expectedFromSaid: Record<ExpectedFrom, (plane: string) => string> = {
  other_strings: (plane) => `the other strings on the ${plane}`,
  own_units: () => 'the other units of this string',
  sensor: () => 'the irradiance sensor and the module’s datasheet',
  clear_sky: () => 'a clear sky and the module’s datasheet',
};
/** A plane that has no name. */
export const samePlane = 'same plane';
