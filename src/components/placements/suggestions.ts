import { suggestPlaces, type PlaceSuggestion, type Stranger } from '../../domain/commissioning/suggest';
import type { StringNow } from '../../schemas/api/now';
import type { HeardItem } from '../../schemas/live';

/** Strings as the suggestions want them: who answered, by whom, how well. */
export function suggestedFor(
  stranger: Stranger,
  strings: readonly StringNow[],
  answers: readonly HeardItem[],
): PlaceSuggestion[] {
  const by = new Map(answers.map((a) => [a.serial, a]));
  return suggestPlaces(
    stranger,
    strings
      .filter((s) => s.kind !== 'shutdown_only')
      .map((s) => ({
        id: s.id,
        name: s.name,
        slots: s.slots.map((slot) => {
          const answer = slot.serial === null ? undefined : by.get(slot.serial);
          return {
            position: slot.position,
            serial: slot.serial,
            heard: answer !== undefined,
            gateway: answer?.gateway ?? null,
            signal: answer ? (slot.signal ?? answer.signal) : null,
          };
        }),
      })),
  );
}
