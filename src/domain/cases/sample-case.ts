import type { LookAgain } from './after-closing';
import type { CaseFigures, FiguresSlot, FiguresString } from './figures';

/** A string of six units at noon, every one passing 40 V: tests change what they are about. */
export function sampleString(change: Partial<FiguresString> = {}): FiguresString {
  const slots: FiguresSlot[] = Array.from({ length: 6 }, (_, i) => ({
    position: i + 1,
    serial: `K-${i + 1}`,
    state: 'passing',
    verdict: 'ok',
    voltage: 40,
    voltageIn: null,
    expected: 40,
    assumed: false,
  }));
  return {
    id: 'b3',
    name: 'B3',
    shutdownOnly: false,
    optimizing: false,
    at: '2026-06-01T12:00:00.000Z',
    voltage: 240,
    expectedVoltage: 240,
    expectedBand: [230, 250],
    expectedInShutdown: null,
    current: 8,
    power: 1920,
    energyToday: 6000,
    inForce: null,
    dark: false,
    finding: null,
    units: 6,
    passing: 6,
    shutdown: 0,
    silent: 0,
    unheard: 0,
    stuck: 0,
    notShuttingDown: 0,
    unconfirmed: 0,
    output: null,
    slots,
    ...change,
  };
}

export const withSlot = (
  s: FiguresString,
  position: number,
  change: Partial<FiguresSlot>,
): FiguresString => ({
  ...s,
  slots: s.slots.map((slot) => (slot.position === position ? { ...slot, ...change } : slot)),
});

export const sampleFigures = (
  strings: FiguresString[] = [sampleString()],
  light: Partial<CaseFigures['light']> = {},
): CaseFigures => ({
  at: '2026-06-01T12:00:00.000Z',
  light: { is: 'light', elevation: 50, poaGlobal: 800, ...light },
  site: { power: 1850, energyToday: 5800, reportedAt: '2026-06-01T12:00:00.000Z' },
  strings,
});

const NOW = Date.parse('2026-06-01T12:00:30.000Z');
const HOUR_MS = 3_600_000;

/** A case of two stuck units, closed five hours ago in daylight. */
export const sampleLook = (change: Partial<LookAgain> = {}): LookAgain => ({
  kind: 'stuck',
  closedMs: NOW - 5 * HOUR_MS,
  nowMs: NOW,
  now: sampleFigures(),
  strings: ['b3'],
  parts: [2, 5].map((position) => ({ stringId: 'b3', stringName: 'B3', position, serial: `K-${position}` })),
  cause: { open: false },
  relapses: [],
  lightMs: 5 * HOUR_MS,
  shutdownSince: false,
  plannedWork: false,
  days: [],
  ...change,
});
