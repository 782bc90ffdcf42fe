import { readSerial } from '../../domain/commissioning/import/serial';
import type { PlacementsBody, StringBuilt } from '../../schemas/api/as-built';

/** What was typed into the slots of a string and is not saved yet, and what stood there when typing began. */
export interface SlotsDraft {
  serials: Readonly<Record<number, string>>;
  places: Readonly<Record<number, string>>;
  types: Readonly<Record<number, string>>;
  /** Serials seen in the slots that were typed into. */
  seen: Readonly<Record<number, string | null>>;
}
export const EMPTY_DRAFT: SlotsDraft = { serials: {}, places: {}, types: {}, seen: {} };

export const isEmpty = (draft: SlotsDraft): boolean =>
  [draft.serials, draft.places, draft.types].every((part) => Object.keys(part).length === 0);

const clean = (text: string): string => {
  const read = readSerial(text);
  return read.kind === 'serial' ? read.serial : read.kind === 'empty' ? '' : text.trim();
};

/** Types a serial; what equals what stands is no change. */
export function withSerial(
  draft: SlotsDraft,
  string: StringBuilt,
  position: number,
  text: string,
): SlotsDraft {
  const stands = string.slots.find((s) => s.position === position)?.serial ?? null;
  const { [position]: _serial, ...serials } = draft.serials;
  const { [position]: seenBefore, ...seen } = draft.seen;
  if (text === (stands ?? '')) return { ...draft, serials, seen };
  return {
    ...draft,
    serials: { ...serials, [position]: text },
    seen: { ...seen, [position]: position in draft.seen ? (seenBefore ?? null) : stands },
  };
}

export function withFact(
  draft: SlotsDraft,
  string: StringBuilt,
  which: 'places' | 'types',
  position: number,
  value: string,
): SlotsDraft {
  const slot = string.slots.find((s) => s.position === position);
  const stands = which === 'places' ? slot?.roofPlace : slot?.moduleType;
  const { [position]: _old, ...rest } = draft[which];
  return { ...draft, [which]: value === stands ? rest : { ...rest, [position]: value } };
}

/** The serials that would leave their slot. */
export const leaving = (draft: SlotsDraft): string[] =>
  Object.entries(draft.serials).flatMap(([position, text]) => {
    const seen = draft.seen[Number(position)] ?? null;
    return seen !== null && clean(text) !== seen ? [seen] : [];
  });

/** What saving sends, and which position each change is about: faults come back by number. */
export function draftBody(
  string: StringBuilt,
  draft: SlotsDraft,
  how: { move: boolean; retype: boolean; reason: string },
): { body: PlacementsBody; positions: number[] } {
  const typed = Object.entries(draft.serials)
    .map(([position, text]) => ({ position: Number(position), text }))
    .sort((a, b) => a.position - b.position);
  const facts = [...new Set([...Object.keys(draft.places), ...Object.keys(draft.types)])]
    .map(Number)
    .sort((a, b) => a - b);
  return {
    positions: typed.map((t) => t.position),
    body: {
      ...how,
      changes: typed.map(({ position, text }) => ({
        slot: { string: string.id, position },
        serial: text.trim() === '' ? null : text,
        expected: draft.seen[position] ?? null,
      })),
      slots: facts.map((position) => ({
        string: string.id,
        position,
        ...(draft.places[position] !== undefined && { roofPlace: draft.places[position] }),
        ...(draft.types[position] !== undefined && { moduleType: draft.types[position] }),
      })),
    },
  };
}

/** After somebody else's change: the edit goes on from what stands now, with what was typed. */
export const rebased = (draft: SlotsDraft, string: StringBuilt): SlotsDraft => ({
  ...draft,
  seen: Object.fromEntries(
    Object.keys(draft.serials).map((position) => [
      position,
      string.slots.find((s) => s.position === Number(position))?.serial ?? null,
    ]),
  ),
});
