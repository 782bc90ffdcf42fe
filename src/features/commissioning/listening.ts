import type { RollCallPage } from '../../schemas/api/roll-call';
import type { RollTally } from './tally';

/** Who of those that should hear answers hears nothing, and of how many units nobody can tell therefore. */
export interface Deaf {
  /** Nothing at all listens. */
  all: boolean;
  /** Loggers and gateways that say nothing; of loggers only where no gateway says it better. */
  who: string[];
  loggers: boolean;
  /** When the last of them was heard, ISO 8601; null: never. */
  since: string | null;
  /** Strings whose missing units could be heard by nobody else; null: of no string can anything be told. */
  strings: ReadonlySet<string> | null;
  missing: number;
}

/** So many intervals without a word, and nobody counts on being heard there; the rest is for what is on its way. */
const INTERVALS = 2;
const ON_ITS_WAY_S = 30;

/**
 * What does not listen at `now`; null where all do. A missing unit's gateway is known only by its neighbours in the string,
 * so of a string without answers nothing can be told while anything is deaf.
 */
export function deafOf(page: RollCallPage, tally: RollTally, now: Date): Deaf | null {
  const from = new Date(
    now.getTime() - 1000 * (INTERVALS * page.reportIntervalS + ON_ITS_WAY_S),
  ).toISOString();
  const loggers = page.loggers.filter((l) => (l.lastSpokeAt ?? '') < from);
  const gateways = tally.gateways.filter((g) => (g.lastHeardAt ?? '') < from);
  const mute = loggers.length === page.loggers.length;
  const all = gateways.length === tally.gateways.length && (gateways.length > 0 || mute);
  if (!all && gateways.length + loggers.length === 0) return null;
  const byLogger = all ? mute : gateways.length === 0;
  const times = [
    ...gateways.map((g) => g.lastHeardAt),
    ...(byLogger ? loggers.map((l) => l.lastSpokeAt) : []),
  ];
  const names = new Set(gateways.map((g) => g.name));
  const strings = tally.strings.filter(
    (s) => s.heard === 0 || s.units.some((u) => u.answer && names.has(u.answer.gateway)),
  );
  return {
    all,
    who: byLogger ? loggers.map((l) => l.serial) : [...names],
    loggers: byLogger,
    since: times.reduce((last, t) => ((t ?? '') > (last ?? '') ? t : last), null),
    strings: all ? null : new Set(strings.map((s) => s.string.id)),
    missing: all ? tally.missing.length : strings.reduce((n, s) => n + s.units.length - s.heard, 0),
  };
}
