import type { UnitType } from '../../equipment/unit-type';
import { readingAround, type ReadSite, type ReadString } from './around';
import { judgedNow } from './judged-now';
import type { JudgedReading, TakenReading } from './judge-reading';
import { stagesFor, type ReadingStage } from './stages';

type Judged = Pick<JudgedReading, 'outcome' | 'headline' | 'siblings' | 'heard'>;
interface StringRead extends ReadString {
  readings: readonly (TakenReading & { finding: Judged | null })[];
}
export interface SiteRead extends ReadSite {
  unitTypes: readonly (ReadSite['unitTypes'][number] & Pick<UnitType, 'releasedBy'>)[];
  strings: readonly StringRead[];
}

/** What was read of a string at one stage, and what it means. */
export interface StageRead {
  stringId: string;
  stage: ReadingStage;
  outcome: JudgedReading['outcome'] | 'unread';
  headline: string;
  /** What the two readings to earth say together; null: not both taken. */
  earth: JudgedReading['earth'];
  /** Judged with what has been recorded since, where that says more than was known then; null: it does not. */
  now: Pick<JudgedReading, 'outcome' | 'headline' | 'siblings'> | null;
}

function stageRead(sheet: SiteRead, string: StringRead, stage: ReadingStage): StageRead {
  const at = (kind: TakenReading['kind']) =>
    string.readings.find((r) => r.stage === stage && r.kind === kind) ?? null;
  const between = at('positive_to_negative');
  const negative = at('negative_to_earth');
  const kept = between?.finding ?? null;
  // only strings measured since can say more than was known
  const later =
    between &&
    (!kept || readingAround(sheet, string.id, between).siblings.length > kept.siblings.length) &&
    judgedNow(sheet, string.id, between);
  const known = kept ?? (later || null);
  const together = negative && at('positive_to_earth') ? judgedNow(sheet, string.id, negative) : null;
  const fault = together?.earth?.outcome === 'fault';
  return {
    stringId: string.id,
    stage,
    outcome: fault ? 'finding' : (known?.outcome ?? 'unread'),
    headline: fault ? together.headline : (known?.headline ?? ''),
    earth: together?.earth ?? null,
    now:
      kept && later && (later.outcome !== kept.outcome || later.headline !== kept.headline)
        ? { outcome: later.outcome, headline: later.headline, siblings: later.siblings }
        : null,
  };
}

/**
 * Every string at every stage that its type asks for, and at others where something was read all the same.
 * @throws RangeError as `readingAround`
 */
export function stagesRead(sheet: SiteRead): StageRead[] {
  return sheet.strings.flatMap((string) => {
    const type = sheet.unitTypes.find((t) => t.id === string.unitTypeId);
    const asked = type ? stagesFor(type) : [];
    const more = string.readings.map((r) => r.stage).filter((s) => !asked.includes(s));
    return [...new Set([...asked, ...more])].map((stage) => stageRead(sheet, string, stage));
  });
}
