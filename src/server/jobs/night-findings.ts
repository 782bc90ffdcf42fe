import type { FoundCause, FoundUnit } from '../../domain/causes/changes';
import type { OutputFinding } from '../../domain/output/low-output';
import type { LoopFinding } from '../../domain/output/resistance';
import type { WeakUnit } from '../../domain/output/weak-unit';
import type { MembershipSuspect } from '../../schemas/api/membership';
import type { KeptOutputFinding } from '../queries/output-days';
import type { OutputString } from '../queries/output-series';
import { causePlaces } from '../../words/domain-causes';
import {
  nightLoop,
  nightLowOutput,
  nightParts,
  nightWeakUnit,
  nightWrongString,
} from '../../words/night-findings';

/** What a night found, as causes. */

const whole = (s: OutputString, sinceS: number): FoundUnit => ({
  stringId: s.ref,
  stringName: s.name,
  position: null,
  serial: null,
  sinceS,
});
const unitOf = (s: OutputString, slot: number, sinceS: number): FoundUnit => ({
  stringId: s.ref,
  stringName: s.name,
  position: slot + 1,
  serial: s.serials[slot] ?? null,
  sinceS,
});

/** A finding with its days by date. */
export function keptFinding(
  finding: OutputFinding,
  days: readonly string[],
  scope: KeptOutputFinding['scope'],
): KeptOutputFinding {
  return { ...finding, days: finding.days.map((d) => ({ ...d, day: days[d.day] ?? '' })), scope };
}

export function lowOutputCause(
  siteRef: string,
  members: readonly OutputString[],
  finding: OutputFinding,
  kept: KeptOutputFinding,
  sinceS: number,
): FoundCause {
  const share = finding.loss?.share ?? 0;
  const low = finding.days.filter((d) => d.low).length;
  const bySiblings = finding.method === 'siblings';
  const days = Math.max(1, finding.days.length);
  const names = members.map((m) => m.name);
  const key = [...members].map((m) => m.ref).sort()[0] ?? '';
  return {
    key: `low_output:string:${key}@${siteRef}`,
    kind: 'low_output',
    sharedPart:
      members.length === 1
        ? { kind: 'string', name: nightParts.strings(names) }
        : { kind: 'input', name: nightParts.inputOf(names) },
    headline: nightLowOutput.headline(names, share, bySiblings),
    evidence: nightLowOutput.evidence(finding.signature?.words, low, finding.days.length, bySiblings),
    figures: { finding: kept },
    alternatives: finding.signature?.couldBe ?? [],
    confidence: Math.min(finding.confidence, finding.signature?.confidence ?? 1),
    units: members.map((m) => whole(m, sinceS)),
    sinceS,
    lossWhDay: finding.lossKWh === null ? null : (1000 * finding.lossKWh.value) / days,
  };
}

export function loopCause(
  siteRef: string,
  s: OutputString,
  finding: LoopFinding,
  sinceS: number,
  lossWhDay: number,
): FoundCause {
  const ohm = finding.above?.ohm ?? 0;
  return {
    key: `loop_resistance:string:${s.ref}@${siteRef}`,
    kind: 'loop_resistance',
    sharedPart: { kind: 'string', name: s.name },
    headline: nightLoop.headline(s.name, ohm),
    evidence: finding.words,
    figures: { finding },
    alternatives: finding.couldBe,
    confidence: finding.confidence,
    units: [whole(s, sinceS)],
    sinceS,
    lossWhDay,
  };
}

export function weakUnitCause(
  siteRef: string,
  s: OutputString,
  weak: WeakUnit,
  sinceS: number,
  unitDayWh: number | null,
): FoundCause {
  return {
    key: `weak_unit:unit:${s.ref}:${weak.unit + 1}@${siteRef}`,
    kind: 'weak_unit',
    sharedPart: { kind: 'unit', name: s.serials[weak.unit] ?? causePlaces.position(s.name, weak.unit + 1) },
    headline:
      weak.kind === 'bypassed_substring'
        ? nightWeakUnit.bypassed(s.name, weak.unit + 1, weak.count ?? 0)
        : nightWeakUnit.low(s.name, weak.unit + 1, 1 - weak.ratio),
    evidence: nightWeakUnit.evidence(weak.words, weak.share),
    figures: { finding: weak },
    alternatives: weak.couldBe,
    confidence: weak.confidence,
    units: [unitOf(s, weak.unit, sinceS)],
    sinceS,
    lossWhDay: unitDayWh === null ? null : (1 - weak.ratio) * unitDayWh,
  };
}

/** Units that carry another string's current; two that stand in each other's place are one cause. */
export function wrongStringCauses(
  siteRef: string,
  suspects: readonly MembershipSuspect[],
  sinceS: number,
): FoundCause[] {
  const misfits = suspects.filter((s) => s.outcome === 'elsewhere');
  const idOf = (s: { stringId: string; position: number }): string => `${s.stringId}:${s.position}`;
  const done = new Set<string>();
  return misfits.flatMap((s): FoundCause[] => {
    if (done.has(idOf(s))) return [];
    const pair = s.counterpart;
    const facing = misfits.filter((m) => m.string === s.otherString && m.otherString === s.string);
    const other = pair
      ? misfits.find((m) => idOf(m) === idOf(pair))
      : facing.length === 1 &&
          misfits.filter((m) => m.string === s.string && m.otherString === s.otherString).length === 1
        ? facing[0]
        : undefined;
    const both = other ? [s, other] : [s];
    both.forEach((m) => done.add(idOf(m)));
    const unit = (m: MembershipSuspect): FoundUnit => ({
      stringId: m.stringId,
      stringName: m.string,
      position: m.position,
      serial: m.serial,
      sinceS,
    });
    return [
      {
        key: `wrong_string:unit:${both.map(idOf).sort()[0]}@${siteRef}`,
        kind: 'wrong_string',
        sharedPart: null,
        headline: other
          ? nightWrongString.eachInTheOthers(s.position, s.string, other.position, other.string)
          : nightWrongString.carriesAnothers(s.position, s.string, s.otherString),
        evidence: nightWrongString.evidence(both.map((m) => m.words)),
        figures: {
          units: both.map(({ series: _, ...m }) => m),
        },
        alternatives: nightWrongString.couldBe,
        confidence: 0.9,
        units: both.map(unit),
        sinceS,
        lossWhDay: null,
      },
    ];
  });
}
