import { numberOf, wordOf, written, type FigureWord } from './figure-word';
import type { CheckContext, CheckStanding, SiblingCurrent } from './definition';

/** A string's current against its neighbours and against its datasheet. Amperes, W/m². */

/** Share from the average within which identical strings lie under stable irradiance. */
export const CURRENT_SPREAD = 0.05;
export const CURRENT_SOURCE =
  'IEC 62446:2009, clause 5.4.5, as quoted by others: within 5 % of the average under stable irradiance';
/** Neighbours count when they were measured this close in time, s; their light within this share, where both are known. */
const SAME_LIGHT_S = 1800;
const SAME_LIGHT_SHARE = 0.05;
/** Own rule: a datasheet scaled by irradiance says no more than this, for temperature, tilt of the sensor and dirt. */
const SHEET_SPREAD = 0.15;

/** Strings whose current may be compared: measured in the same way, close in time, under the same light. */
export function comparable(
  standing: Pick<CheckStanding, 'figures' | 'atS'>,
  siblings: readonly SiblingCurrent[],
): SiblingCurrent[] {
  const method = wordOf(standing.figures, 'method');
  const poa = numberOf(standing.figures, 'poaGlobal');
  return siblings.filter(
    (s) =>
      s.method === method &&
      Math.abs(s.atS - standing.atS) <= SAME_LIGHT_S &&
      (poa === null || s.poaGlobal === null || Math.abs(s.poaGlobal - poa) <= SAME_LIGHT_SHARE * poa),
  );
}

/** What the sheet gives at this irradiance, A; null without irradiance. */
export function sheetCurrent(
  context: Pick<CheckContext, 'module'>,
  method: string | null,
  poaGlobal: number | null,
): number | null {
  if (poaGlobal === null || poaGlobal < 100) return null;
  return ((method === 'short_circuit' ? context.module.iscRef : context.module.impRef) * poaGlobal) / 1000;
}

export function currentWords(standing: CheckStanding, context: CheckContext): FigureWord[] {
  const current = numberOf(standing.figures, 'current');
  if (current === null) return [];
  if (current <= 0)
    return [
      {
        weight: 'blocks',
        words:
          current < 0
            ? `${written(current)} A: current flows the wrong way round, or the clamp is turned.`
            : 'No current flows.',
        remedy:
          'Turn the clamp as its arrow says; then look for an open connector or a string that is not released.',
        source: CURRENT_SOURCE,
      },
    ];
  // optimizing units set their own output: neither neighbours nor the sheet say what it should be
  if (context.unitType.kind === 'optimizing') return [];
  const words: FigureWord[] = [];
  const others = comparable(standing, context.siblingCurrents);
  if (others.length > 0) {
    const average = (current + others.reduce((sum, s) => sum + s.currentA, 0)) / (others.length + 1);
    const off = current / average - 1;
    if (Math.abs(off) > CURRENT_SPREAD)
      words.push({
        weight: 'told',
        words: `${written(current)} A is ${Math.abs(Math.round(off * 100))} % ${off < 0 ? 'below' : 'above'} the average of ${others.length + 1} strings measured with it (${written(average)} A).`,
        remedy: 'Measure these strings again, one after the other, while the light is steady.',
        source: CURRENT_SOURCE,
      });
  }
  const sheet = sheetCurrent(
    context,
    wordOf(standing.figures, 'method'),
    numberOf(standing.figures, 'poaGlobal'),
  );
  if (sheet !== null && Math.abs(current / sheet - 1) > SHEET_SPREAD)
    words.push({
      weight: 'told',
      words: `${written(current)} A is far from the ${written(Number(sheet.toFixed(1)))} A that the datasheet gives at this irradiance.`,
      remedy: 'Check the irradiance, shade, and whether the inverter holds the string back.',
      source: 'module datasheet scaled by irradiance; ±15 % is a rule of our own',
    });
  return words;
}
