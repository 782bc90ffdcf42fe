import type { InputReading } from '../../domain/verdicts/conductors';
import { asIngest } from '../db/transaction';
import { stringsNow } from '../queries/now';
import type { SiteJudge } from './judge-site';

type ExpectedModule = NonNullable<InputReading['module']>;

/** 1.645 standard deviations to each side hold nine times in ten. */
const BAND_SD = 1.645;

/**
 * What one passing module of each string should give now, for the strings of which only the input's voltage is
 * known. The others explain themselves by their units.
 */
export async function expectedModules(judge: SiteJudge): Promise<Map<number, ExpectedModule>> {
  const silent = [...judge.strings.values()].filter((j) => j.context.behaviour.kind === 'shutdown_only');
  const expected = new Map<number, ExpectedModule>();
  if (silent.length === 0) return expected;
  const byName = new Map(silent.map((j) => [j.string.name, j]));
  const which = { siteId: judge.site.id, stringIds: silent.map((j) => j.string.id) };
  const now = await asIngest((tx) => stringsNow(tx, new Date(), which));
  for (const string of now) {
    const judged = byName.get(string.name);
    const units = judged?.context.slots.filter(Boolean).length ?? 0;
    if (!judged || units === 0 || string.expectedVoltage === null || string.expectedBand === null) continue;
    const [low, high] = string.expectedBand;
    expected.set(judged.string.id, {
      expectedV: string.expectedVoltage / units,
      relativeSd: (high - low) / 2 / BAND_SD / string.expectedVoltage,
      siblings: string.expectedStrings,
    });
  }
  return expected;
}
