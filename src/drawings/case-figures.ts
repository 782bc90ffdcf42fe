import type { CaseFigures, FiguresString, LightNow } from '../domain/cases/figures';
import { amperes, energy, listed, number, percent, power, quantity, volts } from './numbers';
import type { StaircaseInput } from './staircase-geometry';

/** The figures of a case in words: for its page and for paper. */

const LIGHT_WORDS: Record<LightNow, string> = { light: 'daylight', dim: 'dawn or dusk', dark: 'dark' };

export function lightInWords({ light }: CaseFigures): string {
  const sun = `sun ${quantity(Math.abs(light.elevation), '°').replace(/\s°/, '°')} ${light.elevation >= 0 ? 'above' : 'below'} the horizon`;
  return `${LIGHT_WORDS[light.is]}, ${sun}${light.poaGlobal === null ? '' : `, ${number(light.poaGlobal)} W/m² in the plane`}`;
}

/** "12 of 14 pass, 2 stuck"; for strings whose units say nothing, that. */
export function unitsInWords(s: FiguresString): string {
  if (s.shutdownOnly) return 'units tell nothing themselves';
  const parts = [`${s.passing} of ${s.units} pass`];
  if (s.notShuttingDown > 0) parts.push(`${s.notShuttingDown} not shutting down`);
  if (s.stuck > 0) parts.push(`${s.stuck} stuck`);
  if (s.shutdown > s.stuck) parts.push(`${s.shutdown - s.stuck} in shutdown`);
  if (s.unheard > 0) parts.push(`${s.unheard} unheard`);
  if (s.silent > 0) parts.push(`${s.silent} silent`);
  if (s.unconfirmed > 0) parts.push(`${s.unconfirmed} unconfirmed`);
  return parts.join(', ');
}

const known = (text: string): string => (text === '–' ? 'not known' : text);

function voltageInWords(s: FiguresString): string {
  if (s.voltage === null) return 'not known';
  if (s.expectedInShutdown !== null)
    return `${volts(s.voltage)}, ${volts(s.expectedInShutdown)} expected in shutdown`;
  return s.expectedVoltage === null
    ? volts(s.voltage)
    : `${volts(s.voltage)} of ${volts(s.expectedVoltage)} expected`;
}

export interface ComparedLine {
  /** The string's name, or "Site". */
  subject: string;
  figure: string;
  before: string;
  /** null: nothing was looked at again yet. */
  after: string | null;
}

/** Before and after, line by line: the site, then every string that the case is about. */
export function comparedFigures(before: CaseFigures, after: CaseFigures | null): ComparedLine[] {
  const lines: ComparedLine[] = [];
  const ofSite = (figure: string, say: (f: CaseFigures) => string) =>
    lines.push({ subject: 'Site', figure, before: say(before), after: after && say(after) });
  ofSite('Light', lightInWords);
  ofSite('Power, AC', (f) => known(power(f.site.power)));
  ofSite('Energy of the day so far', (f) => known(energy(f.site.energyToday)));
  for (const then of before.strings.filter((s) => s.slots.length > 0)) {
    const now = after?.strings.find((s) => s.id === then.id);
    const ofString = (figure: string, say: (s: FiguresString) => string) =>
      lines.push({
        subject: then.name,
        figure,
        before: say(then),
        after: after && (now ? say(now) : 'no longer on the as-built'),
      });
    ofString('Voltage', voltageInWords);
    ofString('Units', unitsInWords);
    ofString('Current', (s) => known(amperes(s.current)));
    ofString('Energy of the day so far', (s) => known(energy(s.energyToday)));
    if (then.output ?? now?.output)
      ofString('Last day judged', (s) =>
        s.output ? `${percent(s.output.ratio)} of expected (${s.output.day})` : 'not judged',
      );
  }
  return lines;
}

/** "B3 positions 5 and 9, B4 (whole string)". */
export function partsInWords(
  parts: readonly { stringName: string; position: number | null }[],
  strings: readonly string[],
): string {
  const named = new Map<string, number[]>(strings.map((name) => [name, []]));
  for (const part of parts) {
    const positions = named.get(part.stringName) ?? [];
    if (part.position !== null) positions.push(part.position);
    named.set(part.stringName, positions);
  }
  return [...named]
    .map(([name, positions]) =>
      positions.length === 0
        ? `${name} (whole string)`
        : `${name} ${positions.length === 1 ? 'position' : 'positions'} ${listed(positions.sort((a, b) => a - b))}`,
    )
    .join(', ');
}

/** A string's figures as its staircase. */
export const staircaseOf = (s: FiguresString): StaircaseInput => ({
  slots: s.slots,
  voltage: s.voltage,
  expectedVoltage: s.expectedVoltage,
  expectedInShutdown: s.expectedInShutdown,
});
