import { CASE_KIND_WORDS } from '../../words/domain-cases';
import type { CauseKind } from '../../domain/causes/kinds';
import { energy, money } from '../../drawings/numbers';
import { lookOf } from '../../components/states/words';
import type { Tone } from '../../components/ui/Tag';
import type { CauseItem, CausesPage } from '../../schemas/api/causes';
import { causesWords } from '../../words/causes';

export const kindWords = (kind: CauseKind): string => CASE_KIND_WORDS[kind];

export const KIND_TONE: Record<CauseKind, { tone: Tone; shape: string }> = {
  // as everywhere else
  not_shutting_down: lookOf(null, 'not_shutting_down'),
  stuck: lookOf(null, 'stuck'),
  unconfirmed: lookOf(null, 'unconfirmed'),
  silent: lookOf('silent', null),
  low_output: { tone: 'rust', shape: '↓' },
  loop_resistance: { tone: 'rust', shape: 'Ω' },
  wrong_string: { tone: 'outline', shape: '⇄' },
  weak_unit: { tone: 'rust', shape: '◣' },
};

/** What follows from a cause and what to do. */
export const WHAT_FOLLOWS: Record<CauseKind, string> = {
  not_shutting_down: causesWords.treatEveryStringOf,
  stuck: causesWords.theseUnitsHoldBack,
  unconfirmed: causesWords.shutdownIsCommandedAnd,
  silent: causesWords.whetherTheseUnitsFollow,
  low_output: causesWords.itMakesLessThan,
  loop_resistance: causesWords.somethingBetweenTheUnits,
  wrong_string: causesWords.theDrawingMayBe,
  weak_unit: causesWords.itsNeighboursUnderThe,
};

/** "at 3 sites". */
const atSites = (causes: readonly CauseItem[]): string => {
  const names = [...new Set(causes.map((c) => c.siteName))];
  return names.length === 1 ? causesWords.atNames(names[0]) : causesWords.atNames2(names.length);
};

/** The page's heading and the sentence under it. */
export function listFinding(page: CausesPage): { finding: string; sentence: string } {
  const { causes, view } = page;
  const open = causes.filter((c) => c.closedAt === null);
  if (view.show === 'over')
    return {
      finding: causesWords.endedInTheLast(causes.length),
      sentence: causesWords.whatWasFoundWhat,
    };
  const hazards = open.filter((c) => c.hazard);
  if (hazards.length > 0)
    return {
      finding: `${hazardSubject(hazards)} ${atSites(hazards)}`,
      sentence: causesWords.treatEveryStringThere,
    };
  if (open.length === 0)
    return filtered(page)
      ? { finding: causesWords.nothingFits, sentence: causesWords.lookAtAllKinds }
      : {
          finding: causesWords.nothingNeedsAttention,
          sentence: causesWords.noCauseIsOpen,
        };
  const perDay = open.reduce((sum, c) => sum + (c.lossWhDay ?? 0), 0);
  return {
    finding: causesWords.causesAreOpen(open.length, atSites(open)),
    sentence: perDay > 0 ? causesWords.togetherTheyCostAbout(perDay) : causesWords.theGravestComeFirst,
  };
}

/** "Two units do not shut down": units where they are known, else strings. */
function hazardSubject(hazards: readonly CauseItem[]): string {
  const all = hazards.flatMap((c) => c.units);
  const units = all.filter((u) => u.position !== null).length;
  const n = units > 0 ? units : new Set(all.map((u) => u.stringId)).size;
  const one = units > 0 ? 'unit' : 'string';
  return causesWords.doNotShutDown(n, one);
}

export const filtered = ({ view }: Pick<CausesPage, 'view'>): boolean =>
  view.kind !== 'any' || view.site !== undefined || view.q !== '';

/** "12 kWh (€ 3) a day"; an empty text where nothing is known. */
export function lossWords(
  wh: number | null,
  worth: number | null,
  currency: string | null,
  per = '',
): string {
  if (wh === null || wh < 1) return '';
  return `${energy(wh)}${worth !== null && currency !== null ? ` (${money(worth, currency)})` : ''}${per}`;
}

/** "14 units of A1 and A2", "string B3". */
export function partsWords(units: CauseItem['units']): string {
  const strings = [...new Set(units.map((u) => u.stringName))];
  const where = strings.length > 3 ? causesWords.countedStringsString(strings.length) : strings.join(', ');
  if (units.every((u) => u.position === null)) return `${strings.length === 1 ? 'string ' : ''}${where}`;
  const one = units[0];
  if (units.length === 1 && one) return causesWords.stringPosition(one.stringName, one.position);
  return causesWords.unitsOfWhere(units.length, where);
}
