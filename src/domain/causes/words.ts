import {
  aNeighbourIsHeard,
  causeCouldBe,
  causeEvidence as evidence,
  causeHeadlines as said,
  causeRivals,
  type CauseSubject,
} from '../../words/domain-causes';
import { inputName, type Candidate, type Item, type Mode } from './candidates';
import type { CauseVerdict, SiteCondition } from './site';

/** Which sentences stand for a cause: every page, mail and report says the same. */

const total = (items: readonly Item[]): number => items.reduce((sum, i) => sum + i.units, 0);
const stringNames = (items: readonly Item[]): string[] => [...new Set(items.map((i) => i.string.name))];

/** Of whom an item list speaks: some of n units where only the string's voltage tells. */
function subject(items: readonly Item[]): CauseSubject {
  const [only] = items;
  if (items.length === 1 && only !== undefined) {
    const string = only.string.name;
    if (only.slot !== null) return { is: 'unit', position: only.slot.position, string };
    const found = only.string.finding?.evidence;
    if (found?.units != null) return { is: 'some', units: found.units, ofN: found.ofN, string };
    return { is: 'string', string };
  }
  if (items.every((i) => i.slot === null)) return { is: 'strings', strings: items.length };
  return { is: 'units', units: total(items) };
}

const singular = (items: readonly Item[]): number => {
  const [only] = items;
  if (items.length !== 1 || only === undefined) return 2;
  return only.slot === null ? (only.string.finding?.evidence.units ?? 1) : 1;
};

/** The finding as a heading. */
export function headlineFor(verdict: CauseVerdict, cause: Candidate, items: readonly Item[]): string {
  const n = total(items);
  const { kind, name } = cause.part;
  const plain = (): string => said.alone(subject(items), verdict, singular(items));
  switch (cause.mode) {
    case 'transmitter_lost':
      return said.transmitterNotHeard(name, n);
    case 'weak_signal':
      return kind === 'transmitter' ? said.transmitterTooWeak(name, n) : said.keepAliveTooWeak(name, n);
    case 'transmitter_on':
      return said.transmitterSends(name, verdict, n);
    case 'cross_talk':
      return said.hearANeighbour(name, verdict, n, stringNames(items));
    case 'gateway':
      return verdict === 'silent' || verdict === 'unconfirmed'
        ? said.gatewaySilent(name, n)
        : said.throughGateway(name, verdict, n);
    case 'logger':
      return verdict === 'not_shutting_down'
        ? said.ofLogger(name, verdict, n)
        : said.loggerReportsNothing(name, n);
    case 'string':
      return items.length === 1 ? plain() : said.allOf('string', name, verdict, n);
    case 'zone':
      return said.allOf('zone', name, verdict, n);
    case 'inverter':
      return said.allOn('inverter', name, verdict, n);
    case 'input':
      return said.inputAtVoltage(name, items.length);
    case 'site':
      return said.wholeSite(verdict, n);
    case 'tells_nothing':
      return said.canNotSay(name, n);
    case 'night':
      return said.tooDark(name, n);
    case 'not_heard_yet':
      return said.notHeardYet(name, n);
    case 'unit':
      return plain();
  }
}

/** What was compared, with figures. */
export function evidenceWords(
  verdict: CauseVerdict,
  cause: Candidate,
  items: readonly Item[],
  site: SiteCondition,
): string {
  const of = cause.members.filter((m) => m.shows !== 'unknown');
  const shown = of.filter((m) => m.shows === 'abnormal').length;
  const sentences: string[] = [];
  const [only] = items;
  if (items.length === 1 && only !== undefined && cause.mode === 'unit') {
    const others = only.string.slots.filter((s) => s.verdict === 'ok' && s.position !== only.slot?.position);
    sentences.push(evidence.itAlone(others.length, only.string.name, verdict));
  } else if (items.some((i) => i.slot !== null))
    sentences.push(evidence.ofThoseThatShare(shown, of.length, verdict, stringNames(items)));
  for (const item of items.slice(0, 3)) if (item.slot === null) sentences.push(voltageWords(item));
  if (cause.mode === 'gateway' || cause.mode === 'logger' || verdict === 'silent') {
    const alive = aliveInputs(items, site);
    if (alive !== null) sentences.push(alive);
  }
  if (verdict === 'silent') sentences.push(items.length === 1 ? evidence.itIsLive : evidence.theyAreLive);
  if (cause.mode === 'cross_talk') sentences.push(evidence.neighbourSends(cause.part.name));
  return sentences.filter(Boolean).join(' ');
}

function voltageWords({ string }: Item): string {
  const e = string.finding?.evidence;
  return e === undefined ? '' : evidence.voltage(inputName(string.inverter, string.input), string.name, e);
}

/** Current on the inputs of silent units: their modules work, it is the reports that are missing. */
function aliveInputs(items: readonly Item[], site: SiteCondition): string | null {
  const names = new Set(items.map((i) => inputName(i.string.inverter, i.string.input)));
  const known = site.inputs.filter((i) => i.currentA !== null && names.has(inputName(i.inverter, i.number)));
  if (known.length === 0) return null;
  const alive = known.filter((i) => (i.currentA ?? 0) > 0.2).length;
  if (known.length > 1)
    return alive > 0 ? evidence.currentOnSome(alive, known.length) : evidence.currentOnNone(known.length);
  if (items.length === 1 && items[0]?.slot !== null)
    return alive > 0 ? evidence.currentOnItsInput : evidence.noCurrentOnItsInput;
  return alive > 0 ? evidence.currentOnTheirInput : evidence.noCurrentOnTheirInput;
}

/** A rival explanation in words. */
export const alternativeFor = (verdict: CauseVerdict, rival: Candidate): string =>
  causeRivals[rival.mode](rival.part, verdict);

/** What may stand behind a cause besides its rivals. */
export function alsoCouldBe(verdict: CauseVerdict, mode: Mode): string[] {
  const heard = verdict === 'not_shutting_down' && (mode === 'unit' || mode === 'string');
  return [...(heard ? [aNeighbourIsHeard] : []), ...causeCouldBe[mode]];
}
