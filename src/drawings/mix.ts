import { drawingsStringsMix } from '../words/drawings-strings';
/** Units of a site or string by state; the Counts of the API satisfy it. */
export interface Mix {
  units: number;
  passing: number;
  shutdown: number;
  unheard: number;
  silent: number;
  dark: number;
  stuck: number;
  notShuttingDown: number;
}
export type MixPart =
  'not_shutting_down' | 'passing' | 'stuck' | 'shutdown' | 'silent' | 'unheard' | 'dark' | 'untold';

/** The parts of a mix in the order in which they are drawn; together they are all units. */
export function mixParts(mix: Mix): { part: MixPart; units: number }[] {
  const told = mix.passing + mix.shutdown + mix.unheard + mix.silent + mix.dark;
  const parts: { part: MixPart; units: number }[] = [
    { part: 'not_shutting_down', units: mix.notShuttingDown },
    { part: 'passing', units: Math.max(0, mix.passing - mix.notShuttingDown) },
    { part: 'stuck', units: mix.stuck },
    { part: 'shutdown', units: Math.max(0, mix.shutdown - mix.stuck) },
    { part: 'silent', units: mix.silent },
    { part: 'unheard', units: mix.unheard },
    { part: 'dark', units: mix.dark },
    { part: 'untold', units: Math.max(0, mix.units - told) },
  ];
  return parts.filter((p) => p.units > 0);
}

export const MIX_WORDS: Record<MixPart, string> = {
  not_shutting_down: drawingsStringsMix.notShuttingDown,
  passing: drawingsStringsMix.passing,
  stuck: drawingsStringsMix.stuck,
  shutdown: drawingsStringsMix.inShutdown,
  silent: drawingsStringsMix.silent,
  unheard: drawingsStringsMix.unheard,
  dark: drawingsStringsMix.dark,
  untold: drawingsStringsMix.tellNothingThemselves,
};

/** Widths in px that add up to `width`, none under 2 px with a gap of 1 between. */
export function mixWidths(parts: readonly { units: number }[], width: number): number[] {
  const total = parts.reduce((sum, p) => sum + p.units, 0);
  if (total === 0) return [];
  const room = width - (parts.length - 1);
  const raw = parts.map((p) => Math.max(2, (p.units / total) * room));
  const over = raw.reduce((a, b) => a + b, 0) - room;
  const widest = raw.indexOf(Math.max(...raw));
  return raw.map((w, i) => (i === widest ? w - over : w));
}
