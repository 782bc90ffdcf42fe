/** Why a serial that was heard may sit in a string. */
export const placeReasons = {
  misread: (serial: string, position: number, how: string) =>
    `${serial} at position ${position} was not heard: ${how}`,
  exchanged: (from: string, to: string) => `two characters exchanged, ${from} for ${to}`,
  alike: (from: string, to: string) => `one character apart, ${from} for ${to}, which look alike`,
  apart: (from: string, to: string) => `one character apart, ${from} for ${to}`,
  serialRun: (position: number) =>
    `serials run on through position ${position}: it comes between those at ${position - 1} and ${position + 1}`,
  serialNear: (distance: number, position: number) =>
    `its serial is ${distance} from that at position ${position}: one box`,
  gateway: (same: number, answered: number, gateway: string) =>
    `${same} of its ${answered} units that answered did so by ${gateway} too`,
  signal: (signal: string, middle: string) =>
    `as strong as its units (${signal} dBm; they are about ${middle} dBm)`,
  /** Slots without a unit, and units not heard; not both none. */
  lacks: (empty: number, silent: number) =>
    [
      empty > 0 ? `${empty === 1 ? 'one slot' : `${empty} slots`} without a unit` : '',
      silent > 0 ? `${silent === 1 ? 'one unit' : `${silent} units`} not heard` : '',
    ]
      .filter(Boolean)
      .join(', '),
};
