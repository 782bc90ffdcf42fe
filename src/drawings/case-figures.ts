import type { CaseFigures, FiguresString, LightNow } from '../domain/cases/figures';
import { amperes, energy, listed, power, quantity, volts } from './numbers';
import type { StaircaseInput } from './staircase-geometry';
import { caseFigures } from '../words/drawings';

/** The figures of a case in words: for its page and for paper. */

const LIGHT_WORDS: Record<LightNow, string> = {
  light: caseFigures.daylight,
  dim: caseFigures.dawnOrDusk,
  dark: caseFigures.dark,
};

export function lightInWords({ light }: CaseFigures): string {
  const sun = caseFigures.sunTheHorizon(
    quantity(Math.abs(light.elevation), '°').replace(/\s°/, '°'),
    light.elevation,
  );
  return `${LIGHT_WORDS[light.is]}, ${sun}${light.poaGlobal === null ? '' : caseFigures.inThePlane(light.poaGlobal)}`;
}

/** "12 of 14 pass, 2 stuck"; for strings whose units say nothing, that. */
export function unitsInWords(s: FiguresString): string {
  if (s.shutdownOnly) return caseFigures.unitsTellNothingThemselves;
  const parts = [caseFigures.ofPass(s.passing, s.units)];
  if (s.notShuttingDown > 0) parts.push(caseFigures.notShuttingDown(s.notShuttingDown));
  if (s.stuck > 0) parts.push(caseFigures.stuckStuck(s.stuck));
  if (s.shutdown > s.stuck) parts.push(caseFigures.inShutdown(s.shutdown, s.stuck));
  if (s.unheard > 0) parts.push(caseFigures.unheardUnheard(s.unheard));
  if (s.silent > 0) parts.push(caseFigures.silentSilent(s.silent));
  if (s.unconfirmed > 0) parts.push(caseFigures.unconfirmedUnconfirmed(s.unconfirmed));
  return parts.join(', ');
}

const known = (text: string): string => (text === '–' ? caseFigures.notKnown : text);

function voltageInWords(s: FiguresString): string {
  if (s.voltage === null) return caseFigures.notKnown;
  if (s.expectedInShutdown !== null) return caseFigures.expectedInShutdown(s.voltage, s.expectedInShutdown);
  return s.expectedVoltage === null ? volts(s.voltage) : caseFigures.ofExpected(s.voltage, s.expectedVoltage);
}

export interface ComparedLine {
  /** The string's name, or "Site". */
  subject: string;
  figure: string;
  before: string;
  /** null: nothing was looked at again yet. */
  after: string | null;
}

/** More strings than this are no table that anybody compares. */
const COMPARED_MOST = 12;

/** Before and after, line by line: the site, then the strings that the case is about, twelve at most. */
export function comparedFigures(before: CaseFigures, after: CaseFigures | null): ComparedLine[] {
  const lines: ComparedLine[] = [];
  const ofSite = (figure: string, say: (f: CaseFigures) => string) =>
    lines.push({ subject: caseFigures.site, figure, before: say(before), after: after && say(after) });
  ofSite(caseFigures.light, lightInWords);
  ofSite(caseFigures.powerAC, (f) => known(power(f.site.power)));
  ofSite(caseFigures.energyOfTheDay, (f) => known(energy(f.site.energyToday)));
  for (const then of before.strings.filter((s) => s.slots.length > 0).slice(0, COMPARED_MOST)) {
    const now = after?.strings.find((s) => s.id === then.id);
    const ofString = (figure: string, say: (s: FiguresString) => string) =>
      lines.push({
        subject: then.name,
        figure,
        before: say(then),
        after: after && (now ? say(now) : caseFigures.noLongerOnThe),
      });
    ofString(caseFigures.voltage, voltageInWords);
    ofString(caseFigures.units, unitsInWords);
    ofString(caseFigures.current, (s) => known(amperes(s.current)));
    ofString(caseFigures.energyOfTheDay, (s) => known(energy(s.energyToday)));
    if (then.output ?? now?.output)
      ofString(caseFigures.lastDayJudged, (s) =>
        s.output ? caseFigures.ofExpected2(s.output.ratio, s.output.day) : caseFigures.notJudged,
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
        ? caseFigures.wholeString(name)
        : `${name} ${positions.length === 1 ? caseFigures.position : caseFigures.positions} ${listed(positions.sort((a, b) => a - b))}`,
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
