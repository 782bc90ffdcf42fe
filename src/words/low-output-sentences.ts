import { countAtStart, counted, energy, listed, money } from '../drawings/numbers';
import type { LowOutput, LowString } from '../schemas/api/low-output-rows';

export const SIGNATURE_WORDS: Record<LowString['signature'], string> = {
  units_missing: 'Whole modules missing',
  bypassed_substring: 'Bypassed cells',
  shade: 'Shade',
  soiling: 'Dirt',
  current_low: 'Current low',
  everything: 'Everything low',
  unclear: 'Unclear',
};

const sum = (values: readonly (number | null)[]): number =>
  values.reduce<number>((total, v) => total + (v ?? 0), 0);

/** The page's heading and what follows from it. */
export function lowFinding(low: LowOutput): { heading: string; sentence: string } {
  const { rows } = low;
  const waiting =
    low.unjudgedSites.length === 0
      ? ''
      : ` No night of ${low.unjudgedSites.length > 3 ? counted(low.unjudgedSites.length, 'site') : listed(low.unjudgedSites)} was judged in the last 14 days.`;
  if (low.judged === 0)
    return {
      heading: 'No string’s output was judged yet',
      sentence:
        'A site’s strings are held against each other after its sunset, when five days with enough sun are known.',
    };
  const cant =
    low.cantTell === 0
      ? ''
      : ` Of ${counted(low.cantTell, 'other')} nothing can be told yet: too few days with enough sun.`;
  if (rows.length === 0)
    return {
      heading: `All strings that could be judged make what they should`,
      sentence: `${counted(low.judged - low.cantTell, 'string')} judged.${cant}${waiting}`,
    };
  const kWh = sum(rows.map((r) => r.lossKWhDay));
  const worth = sum(rows.map((r) => r.moneyDay));
  const priced = rows.every((r) => r.moneyDay !== null) ? '' : ' where a price is set';
  const open = rows.filter((r) => r.openCase === null).length;
  return {
    heading: `${countAtStart(rows.length)} of ${counted(low.judged, 'string')} ${rows.length === 1 ? 'makes' : 'make'} less than ${rows.length === 1 ? 'it' : 'they'} should`,
    sentence: `Together ${energy(kWh * 1000)} a day${low.currency && worth > 0 ? `, ${money(worth, low.currency)}${priced}` : ''}. ${open === 0 ? 'Each has a case.' : `${countAtStart(open)} without a case.`}${cant}${waiting}`,
  };
}
