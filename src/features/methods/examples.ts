import type { Example } from './example';
import { lowOutputExample, rollCallExample, shutdownTestExample } from './examples-commissioning';
import { causesExample, conductorsExample, verdictExample } from './examples-conduct';
import { membershipExample, resistanceExample, weakUnitExample } from './examples-currents';
import { expectedExample, readingExample, yieldsExample } from './examples-electrical';

/** Every live example by the anchor of its note. */
export const EXAMPLES = {
  reading: readingExample,
  verdict: verdictExample,
  conductors: conductorsExample,
  causes: causesExample,
  expected: expectedExample,
  'low-output': lowOutputExample,
  'weak-unit': weakUnitExample,
  membership: membershipExample,
  resistance: resistanceExample,
  'shutdown-test': shutdownTestExample,
  'roll-call': rollCallExample,
  yields: yieldsExample,
} as const satisfies Record<string, Example>;
export type ExampleKey = keyof typeof EXAMPLES;
