import type { FoundCause, FoundUnit } from '../../domain/causes/changes';
import { DECISIVE_METHOD } from '../../domain/output/membership';
import type { OutputFinding } from '../../domain/output/low-output';
import type { LoopFinding } from '../../domain/output/resistance';
import type { WeakUnit } from '../../domain/output/weak-unit';
import type { MembershipSuspect } from '../../schemas/api/membership';
import type { KeptOutputFinding } from '../queries/output-days';
import type { OutputString } from '../queries/output-series';

/** What a night found, as causes. */

const percent = (share: number): string => `${Math.round(100 * share)} %`;
const SIBLINGS_UNKNOWN = 'its own model, since its plane has too few strings to compare';

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
const names = (list: readonly OutputString[]): string => list.map((s) => s.name).join(' and ');

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
  const key = [...members].map((m) => m.ref).sort()[0] ?? '';
  return {
    key: `low_output:string:${key}@${siteRef}`,
    kind: 'low_output',
    sharedPart:
      members.length === 1
        ? { kind: 'string', name: names(members) }
        : { kind: 'input', name: `the input of ${names(members)}` },
    headline: `${members.length === 1 ? 'String' : 'Strings'} ${names(members)} ${members.length === 1 ? 'makes' : 'make'} ${percent(share)} less than ${bySiblings ? 'the strings of the same plane' : 'the modules should'}`,
    evidence: `${sentence(finding.signature?.words ?? 'what it looks like is not clear')} Low on ${low} of the last ${finding.days.length} days with enough sun, held against ${bySiblings ? 'the strings of its plane' : SIBLINGS_UNKNOWN}.`,
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
    headline: `Between the units and the input of ${s.name} there are ${ohm.toFixed(2)} Ω too many`,
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
    sharedPart: { kind: 'unit', name: s.serials[weak.unit] ?? `${s.name} position ${weak.unit + 1}` },
    headline:
      weak.kind === 'bypassed_substring'
        ? `Module ${weak.unit + 1} of ${s.name} has ${weak.count === 1 ? 'a bypassed sub-string of cells' : `${weak.count ?? 0} bypassed sub-strings of cells`}`
        : `Unit ${weak.unit + 1} of ${s.name} gives ${percent(1 - weak.ratio)} less than its neighbours`,
    evidence: `${sentence(weak.words)} So on ${percent(weak.share)} of the quarters under load, on at least two of three days.`,
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
          ? `Unit ${s.position} of ${s.string} and unit ${other.position} of ${other.string} stand in each other's string`
          : `Unit ${s.position} of ${s.string} carries the current of ${s.otherString ?? 'another string'}`,
        // how it is decided is said once, at the end
        evidence: [...both.map((m) => m.words.replace(` ${DECISIVE_METHOD}`, '')), DECISIVE_METHOD].join(' '),
        figures: {
          units: both.map(({ series: _, ...m }) => m),
        },
        alternatives: ['the as-built names the wrong serial', "the unit's current measurement is off"],
        confidence: 0.9,
        units: both.map(unit),
        sinceS,
        lossWhDay: null,
      },
    ];
  });
}

const sentence = (words: string): string => `${words.charAt(0).toUpperCase()}${words.slice(1)}.`;
