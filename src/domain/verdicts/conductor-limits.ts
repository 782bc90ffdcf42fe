/** NEC 690.12(B)(1): conductors outside the array boundary after initiation. */
export const OUTSIDE_ARRAY_LIMIT_V = 30;

/** NEC 690.12(B)(2), 2017 and later editions: inside the array boundary, between two conductors or to earth. */
export const INSIDE_ARRAY_LIMIT_V = 80;

/**
 * V that a home run may carry after the rule set's time, any two conductors or conductor to earth. Inside the array
 * the 2014 edition sets no limit; 80 V are a yardstick there too.
 */
export const homeRunLimit = (homeRunLeavesArray: boolean): number =>
  homeRunLeavesArray ? OUTSIDE_ARRAY_LIMIT_V : INSIDE_ARRAY_LIMIT_V;
