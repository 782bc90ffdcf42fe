import { checkCurrentSaid } from '../../../words/domain-check-figures';
import { numberOf, wordOf, written, type FigureWord } from './figure-word';
import type { CheckContext, CheckStanding, SiblingCurrent } from './definition';

/** A string's current against its neighbours and against its datasheet. Amperes, W/m². */

/** Share from the average within which identical strings lie under stable irradiance. */
export const CURRENT_SPREAD = 0.05;
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
        words: current < 0 ? checkCurrentSaid.backwards(written(current)) : checkCurrentSaid.none,
        remedy: checkCurrentSaid.noneRemedy,
        source: checkCurrentSaid.source,
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
        words: (off < 0 ? checkCurrentSaid.below : checkCurrentSaid.above)(
          written(current),
          Math.abs(Math.round(off * 100)),
          others.length + 1,
          written(average),
        ),
        remedy: checkCurrentSaid.apartRemedy,
        source: checkCurrentSaid.source,
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
      words: checkCurrentSaid.offSheet(written(current), written(Number(sheet.toFixed(1)))),
      remedy: checkCurrentSaid.offSheetRemedy,
      source: checkCurrentSaid.offSheetSource,
    });
  return words;
}
