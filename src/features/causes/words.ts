import { CASE_KIND_WORDS } from '../../domain/cases/cases';
import type { CauseKind } from '../../domain/causes/kinds';
import { countAtStart, counted, energy, money } from '../../drawings/numbers';
import type { Tone } from '../../components/ui/Tag';
import type { CauseItem, CausesPage } from '../../schemas/api/causes';

export const kindWords = (kind: CauseKind): string => CASE_KIND_WORDS[kind];

export const KIND_TONE: Record<CauseKind, { tone: Tone; shape: string }> = {
  not_shutting_down: { tone: 'crimson', shape: '!' },
  stuck: { tone: 'rust', shape: '▁' },
  unconfirmed: { tone: 'outline', shape: '?' },
  silent: { tone: 'slate', shape: '▨' },
  low_output: { tone: 'rust', shape: '↓' },
  loop_resistance: { tone: 'rust', shape: 'Ω' },
  wrong_string: { tone: 'outline', shape: '⇄' },
  weak_unit: { tone: 'rust', shape: '◣' },
};

/** What follows from a cause and what to do. */
export const WHAT_FOLLOWS: Record<CauseKind, string> = {
  not_shutting_down:
    'Treat every string of this site as live and call the site. Nobody may rely on its shutdown until a rated meter shows otherwise.',
  stuck: 'These units hold back their modules’ power though nothing commands shutdown.',
  unconfirmed:
    'Shutdown is commanded and nothing shows that these units followed. Treat their strings as live.',
  silent: 'Whether these units follow a shutdown can’t be confirmed until they are heard again.',
  low_output: 'It makes less than it should, on most days with enough sun.',
  loop_resistance:
    'Something between the units and the inverter’s input takes up voltage and turns it into heat: most often a connector.',
  wrong_string: 'The drawing may be wrong: who isolates a string by it could open the wrong one.',
  weak_unit: 'Its neighbours under the same light give more. The module, its cells or what lies on it.',
};

/** "at 3 sites". */
const atSites = (causes: readonly CauseItem[]): string => {
  const names = [...new Set(causes.map((c) => c.siteName))];
  return names.length === 1 ? `at ${names[0] ?? ''}` : `at ${counted(names.length, 'site')}`;
};

/** The page's heading and the sentence under it. */
export function listFinding(page: CausesPage): { finding: string; sentence: string } {
  const { causes, view } = page;
  const open = causes.filter((c) => c.closedAt === null);
  if (view.show === 'over')
    return {
      finding: `${causes.length === 0 ? 'No' : countAtStart(causes.length)} ${causes.length === 1 ? 'cause' : 'causes'} ended in the last 90 days`,
      sentence: 'What was found, what it cost, and when it was over.',
    };
  const hazards = open.filter((c) => c.hazard);
  if (hazards.length > 0)
    return {
      finding: `${hazardSubject(hazards)} ${atSites(hazards)}`,
      sentence: 'Treat every string there as live and call the site before anything else.',
    };
  if (open.length === 0)
    return filtered(page)
      ? { finding: 'Nothing fits', sentence: 'Look at all kinds and sites, or use fewer words.' }
      : {
          finding: 'Nothing needs attention',
          sentence: 'No cause is open. Night, dark weather, commanded shutdown and planned works are none.',
        };
  const perDay = open.reduce((sum, c) => sum + (c.lossWhDay ?? 0), 0);
  return {
    finding: `${countAtStart(open.length)} ${open.length === 1 ? 'cause is' : 'causes are'} open ${atSites(open)}`,
    sentence:
      perDay > 0
        ? `Together they cost about ${energy(perDay)} a day. The gravest come first.`
        : 'The gravest come first.',
  };
}

/** "Two units do not shut down": units where they are known, else strings. */
function hazardSubject(hazards: readonly CauseItem[]): string {
  const all = hazards.flatMap((c) => c.units);
  const units = all.filter((u) => u.position !== null).length;
  const n = units > 0 ? units : new Set(all.map((u) => u.stringId)).size;
  const one = units > 0 ? 'unit' : 'string';
  return `${countAtStart(n)} ${n === 1 ? `${one} does` : `${one}s do`} not shut down`;
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
  const where = strings.length > 3 ? counted(strings.length, 'string') : strings.join(', ');
  if (units.every((u) => u.position === null)) return `${strings.length === 1 ? 'string ' : ''}${where}`;
  const one = units[0];
  if (units.length === 1 && one) return `${one.stringName}, position ${one.position ?? ''}`;
  return `${counted(units.length, 'unit')} of ${where}`;
}
