import type { ReadingKind, ReadingStage } from '../domain/commissioning/readings/stages';

/** When a reading at a home run is taken, and between what. */

export const STAGE_WORDS: Record<ReadingStage, string> = {
  before_energising: 'before energising',
  after_keep_alive: 'after keep-alive',
  after_roll_call: 'after the roll call',
};
export const KIND_WORDS: Record<ReadingKind, string> = {
  positive_to_negative: '+ to −',
  positive_to_earth: '+ to earth',
  negative_to_earth: '− to earth',
};

/** What is said of a reading to earth beside its finding. */
export const earthReadingSaid = {
  floats: 'the string floats: little voltage to earth, dying away',
  measureToo: (kinds: readonly ReadingKind[]) =>
    `Can't tell yet: measure ${kinds.map((kind) => KIND_WORDS[kind]).join(' and ')} too`,
};
