import { causePlaces } from '../../words/domain-causes';
import { candidatesFor, UNIT_RARITY, type Candidate, type Item } from './candidates';
import {
  CAUSE_VERDICTS,
  type Cause,
  type CauseUnit,
  type CauseVerdict,
  type SiteCondition,
  type SlotCondition,
  type StringCondition,
} from './site';
import { alternativeFor, evidenceWords, headlineFor, alsoCouldBe } from './words';

/** An explanation this much (in ln of odds) worse than the best is not worth naming. */
const WORTH_NAMING = 5;
/** A rival must cover so much of what the chosen explanation covers. */
const RIVAL_COVERS = 0.9;
/** However well an explanation fits, it is inferred from afar. */
const CONFIDENCE_MAX = 0.97;

/**
 * The smallest set of shared parts that explains the abnormal units of a site, gravest first. Explanations are weighed
 * by how rare the part's failure is and by how many of its units show it and don't: a greedy cover (each step takes the
 * part that explains most, Chvátal 1979). What a rival explains as well is kept as an alternative. Units that no part
 * explains better stand alone.
 * @throws never; an empty list means that nothing is abnormal.
 */
export function causesOf(site: SiteCondition): Cause[] {
  return CAUSE_VERDICTS.flatMap((verdict) => causesOfVerdict(verdict, site));
}

function causesOfVerdict(verdict: CauseVerdict, site: SiteCondition): Cause[] {
  const items = site.strings.flatMap((string) => itemsOf(verdict, string));
  const left = new Set(items.filter((i) => i.shows === 'abnormal'));
  if (left.size === 0) return [];
  const candidates = candidatesFor(verdict, site, items);
  const causes: Cause[] = [];
  while (left.size > 0) {
    const weighed = candidates
      .map((candidate) => ({ candidate, gain: gainOf(candidate, left) }))
      .sort((a, b) => b.gain - a.gain);
    const best = weighed[0];
    if (best === undefined || best.gain <= 0) break;
    const covered = best.candidate.members.filter((m) => left.has(m));
    const rivals = weighed
      .slice(1)
      .filter(({ candidate }) => covers(candidate, covered))
      .filter(({ gain }) => best.gain - gain < WORTH_NAMING);
    // standing alone is a rival too: its gain is 0 by definition
    const odds = rivals.reduce((sum, r) => sum + Math.exp(r.gain - best.gain), 1 + Math.exp(-best.gain));
    for (const item of covered) left.delete(item);
    causes.push({
      key: `${verdict}:${best.candidate.mode}:${best.candidate.part.name}`,
      verdict,
      sinceS: Math.min(...covered.map((i) => i.sinceS)),
      sharedPart: best.candidate.part,
      headline: headlineFor(verdict, best.candidate, covered),
      evidence: evidenceWords(verdict, best.candidate, covered, site),
      alternatives: unique([
        ...rivals.map((r) => alternativeFor(verdict, r.candidate)),
        ...alsoCouldBe(verdict, best.candidate.mode),
      ]),
      confidence: Math.min(CONFIDENCE_MAX, 1 / odds),
      units: covered.map(unitOf),
    });
  }
  for (const item of left) causes.push(standingAlone(verdict, item, site));
  return causes.sort((a, b) => b.units.length - a.units.length || a.sinceS - b.sinceS);
}

/** How much less surprising the site is with this explanation than with every unit standing alone. */
function gainOf(candidate: Candidate, left: ReadonlySet<Item>): number {
  let gain = -candidate.rarity;
  for (const member of candidate.members) {
    if (left.has(member)) gain += UNIT_RARITY - candidate.shows;
    else if (member.shows === 'normal') gain -= candidate.spares;
  }
  return gain;
}

function covers(candidate: Candidate, covered: readonly Item[]): boolean {
  const members = new Set(candidate.members);
  return covered.filter((i) => members.has(i)).length >= RIVAL_COVERS * covered.length;
}

function standingAlone(verdict: CauseVerdict, item: Item, site: SiteCondition): Cause {
  const { slot } = item;
  const whole = slot === null;
  const scope = item.string.finding?.evidence.scope;
  const part: Candidate['part'] =
    slot === null
      ? { kind: 'string', name: item.string.name }
      : { kind: 'unit', name: slot.serial ?? causePlaces.position(item.string.name, slot.position) };
  const candidate: Candidate = {
    mode: whole ? 'string' : 'unit',
    part,
    members: [item],
    rarity: UNIT_RARITY,
    shows: 0,
    spares: 0,
  };
  return {
    key: `${verdict}:${part.kind}:${item.id}`,
    verdict,
    sinceS: item.sinceS,
    sharedPart: part,
    headline: headlineFor(verdict, candidate, [item]),
    evidence: evidenceWords(verdict, candidate, [item], site),
    alternatives: unique([
      ...(whole ? (item.string.finding?.evidence.couldBe ?? []) : []),
      ...alsoCouldBe(verdict, whole ? 'string' : 'unit'),
    ]),
    confidence: whole ? (scope === 'string' ? 0.85 : 0.6) : 0.9,
    units: [unitOf(item)],
  };
}

const unitOf = (item: Item): CauseUnit => ({
  stringId: item.string.id,
  stringName: item.string.name,
  position: item.slot?.position ?? null,
  serial: item.slot?.serial ?? null,
  sinceS: item.sinceS,
});

const unique = (list: string[]): string[] => [...new Set(list)];

/** What a string has to show for a verdict: its units, or itself where positions are unknown. */
function itemsOf(verdict: CauseVerdict, string: StringCondition): Item[] {
  const finding = string.finding;
  const units = string.slots.length;
  const whole = (shows: Item['shows'], sinceS: number): Item => ({
    id: string.id,
    string,
    slot: null,
    units,
    sinceS,
    shows,
  });
  const tellsNothing = string.kind === 'shutdown_only';
  const wanted = verdict === 'stuck' ? 'stuck_positions_unknown' : verdict;
  const found = finding !== null && finding.kind === wanted;
  if (tellsNothing && verdict !== 'unconfirmed')
    return verdict === 'silent' ? [] : [whole(found ? 'abnormal' : 'unknown', finding?.sinceS ?? 0)];
  const items = string.slots.map((slot): Item => {
    const abnormal =
      verdict === 'silent' ? slot.state === 'silent' && slot.verdict === 'ok' : slot.verdict === verdict;
    return {
      id: `${string.id}:${slot.position}`,
      string,
      slot,
      units: 1,
      sinceS: slot.sinceS,
      shows: abnormal ? 'abnormal' : isNormal(verdict, slot) ? 'normal' : 'unknown',
    };
  });
  // the conductors contradict the claims of every unit: the string speaks, its units don't
  if (found && !items.some((i) => i.shows === 'abnormal')) items.push(whole('abnormal', finding.sinceS));
  return items;
}

function isNormal(verdict: CauseVerdict, slot: SlotCondition): boolean {
  const speaks = slot.state === 'passing' || slot.state === 'shutdown';
  if (verdict === 'silent' || verdict === 'unconfirmed') return speaks;
  return speaks && slot.state === (verdict === 'stuck' ? 'passing' : 'shutdown');
}
