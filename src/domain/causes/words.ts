import { inputName, type Candidate, type Item, type Mode } from './candidates';
import type { CauseVerdict, SiteCondition } from './site';

/** Plain English for causes: every page, mail and report says the same. */

const count = (n: number, one: string, many: string): string => (n === 1 ? `1 ${one}` : `${n} ${many}`);
const unitsWord = (n: number): string => count(n, 'unit', 'units');
const total = (items: readonly Item[]): number => items.reduce((sum, i) => sum + i.units, 0);
const stringNames = (items: readonly Item[]): string[] => [...new Set(items.map((i) => i.string.name))];

const listed = (names: readonly string[]): string =>
  names.length <= 3
    ? names.join(names.length === 2 ? ' and ' : ', ')
    : `${names.slice(0, 3).join(', ')} and ${names.length - 3} more`;

const DOES: Record<CauseVerdict, [one: string, many: string]> = {
  stuck: ['is stuck in shutdown', 'are stuck in shutdown'],
  not_shutting_down: ['does not shut down', 'do not shut down'],
  unconfirmed: ['has not shown that it shut down', 'have not shown that they shut down'],
  silent: ['is silent', 'are silent'],
};
const does = (verdict: CauseVerdict, n: number): string => DOES[verdict][n === 1 ? 0 : 1];

/** A part once by kind and name: names often begin with their kind ("Gateway 3, laundry"). */
const named = (kind: string, name: string): string =>
  name.trim().toLowerCase().startsWith(kind) ? name.trim() : `${kind} ${name.trim()}`;
const first = (words: string): string => words.charAt(0).toUpperCase() + words.slice(1);

/** How many units an item list speaks of: "k of n units" where only the string's voltage tells. */
function subject(items: readonly Item[]): string {
  const [only] = items;
  if (items.length === 1 && only !== undefined) {
    if (only.slot !== null) return `Unit ${only.slot.position} of ${only.string.name}`;
    const evidence = only.string.finding?.evidence;
    if (evidence?.units != null) return `${evidence.units} of ${evidence.ofN} units of ${only.string.name}`;
    return `String ${only.string.name}`;
  }
  if (items.every((i) => i.slot === null)) return count(items.length, 'string', 'strings');
  return unitsWord(total(items));
}

const singular = (items: readonly Item[]): number => {
  const [only] = items;
  if (items.length !== 1 || only === undefined) return 2;
  return only.slot === null ? (only.string.finding?.evidence.units ?? 1) : 1;
};

/** The finding as a heading. */
export function headlineFor(verdict: CauseVerdict, cause: Candidate, items: readonly Item[]): string {
  const n = unitsWord(total(items));
  const { name } = cause.part;
  const plain = `${subject(items)} ${does(verdict, singular(items))}`;
  switch (cause.mode) {
    case 'transmitter_lost':
      return `${first(named('transmitter', name))} is not heard by ${n}`;
    case 'weak_signal':
      return cause.part.kind === 'transmitter'
        ? `${first(named('transmitter', name))} is too weak for ${n}`
        : `The keep-alive is too weak for ${n} of ${name}`;
    case 'transmitter_on':
      return `${first(named('transmitter', name))} seems to keep sending: ${n} ${does(verdict, total(items))}`;
    case 'cross_talk':
      return `${n} of ${listed(stringNames(items))} seem to hear ${named('transmitter', name)} and ${does(verdict, 2)}`;
    case 'gateway':
      return verdict === 'silent' || verdict === 'unconfirmed'
        ? `${first(named('gateway', name))} has fallen silent, and ${n} with it`
        : `${n} reached through ${named('gateway', name)} ${does(verdict, total(items))}`;
    case 'logger':
      return verdict === 'not_shutting_down'
        ? `${n} of ${named('logger', name)} ${does(verdict, total(items))}`
        : `${first(named('logger', name))} reports nothing of ${n}`;
    case 'string':
      return items.length === 1
        ? plain
        : `All of ${named('string', name)}: ${n} ${does(verdict, total(items))}`;
    case 'zone':
      return `All of ${named('zone', name)}: ${n} ${does(verdict, total(items))}`;
    case 'inverter':
      return `All on ${named('inverter', name)}: ${n} ${does(verdict, total(items))}`;
    case 'input':
      return `${name} stays at voltage: ${count(items.length, 'string', 'strings')} may not shut down`;
    case 'site':
      return `The whole site: ${n} ${does(verdict, total(items))}`;
    case 'tells_nothing':
      return `${n} in ${named('zone', name)} can not say whether they shut down`;
    case 'night':
      return `It is too dark for ${n} in ${named('zone', name)} to say whether they shut down`;
    case 'not_heard_yet':
      return `${n} in ${named('zone', name)} have not answered the roll call and may not obey the initiator`;
    case 'unit':
      return plain;
  }
}

const SHOWN: Record<CauseVerdict, string> = {
  stuck: 'in shutdown while released',
  not_shutting_down: 'passing past the time limit',
  unconfirmed: 'without a sign of having followed',
  silent: 'silent for three report intervals or more',
};

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
    sentences.push(
      `Its ${count(others.length, 'neighbour', 'neighbours')} in ${only.string.name} ${others.length === 1 ? 'does' : 'do'} as expected; it alone is ${SHOWN[verdict]}.`,
    );
  } else if (items.some((i) => i.slot !== null))
    sentences.push(
      `${shown} of ${of.length} units that share it are ${SHOWN[verdict]}, in ${listed(stringNames(items))}.`,
    );
  for (const item of items.slice(0, 3)) if (item.slot === null) sentences.push(voltageWords(item));
  if (cause.mode === 'gateway' || cause.mode === 'logger' || verdict === 'silent') {
    const alive = aliveInputs(items, site);
    if (alive !== null) sentences.push(alive);
  }
  if (verdict === 'silent')
    sentences.push(
      items.length === 1
        ? 'While it is silent, a shutdown can’t be confirmed: treat it as live.'
        : 'While they are silent, a shutdown can’t be confirmed: treat them as live.',
    );
  if (cause.mode === 'cross_talk')
    sentences.push(
      `Their own transmitters are off; ${named('transmitter', cause.part.name)}, which they should not hear, still sends.`,
    );
  return sentences.filter(Boolean).join(' ');
}

function voltageWords(item: Item): string {
  const e = item.string.finding?.evidence;
  if (e === undefined) return '';
  const where =
    e.scope === 'input'
      ? `${inputName(item.string)}, which strings share,`
      : `The input of ${item.string.name}`;
  const expected = e.expectedV === null ? '' : `, ${e.expectedV.toFixed(1)} V expected`;
  return `${where} stands at ${e.measuredV.toFixed(1)} V${expected}; threshold ${e.thresholdV.toFixed(0)} V (${e.thresholdSource}).`;
}

/** Current on the inputs of silent units: their modules work, it is the reports that are missing. */
function aliveInputs(items: readonly Item[], site: SiteCondition): string | null {
  const names = new Set(items.map((i) => inputName(i.string)));
  const known = site.inputs.filter(
    (i) => i.currentA !== null && names.has(`${i.inverter} input ${i.number}`),
  );
  if (known.length === 0) return null;
  const alive = known.filter((i) => (i.currentA ?? 0) > 0.2).length;
  const feeds = items.length === 1 && items[0]?.slot !== null ? 'it feeds' : 'they feed';
  if (known.length === 1)
    return alive > 0
      ? `Current flows on the input that ${feeds}: it is the reports that are missing, not the power.`
      : `No current flows on the input that ${feeds}.`;
  return alive > 0
    ? `Current flows on ${alive} of ${count(known.length, 'input', 'inputs')} that they feed: it is the reports that are missing, not the power.`
    : `No current flows on the ${count(known.length, 'input', 'inputs')} that they feed.`;
}

/** A rival explanation in words. */
export function alternativeFor(verdict: CauseVerdict, rival: Candidate): string {
  const { name } = rival.part;
  const words: Record<Mode, string> = {
    unit: 'Each unit on its own',
    string: `Something that all units of ${named('string', name)} share, its home run for one`,
    weak_signal: `Noise on, or too long a run of, the conductors of ${named(rival.part.kind, name)}`,
    transmitter_lost: `${first(named('transmitter', name))} is off or defective`,
    transmitter_on: `${first(named('transmitter', name))} keeps sending`,
    cross_talk: `The units hear ${named('transmitter', name)}`,
    gateway: first(named('gateway', name)),
    logger: `${first(named('logger', name))} or its connection`,
    input: `The wiring of ${name}`,
    inverter: `${first(named('inverter', name))} or what it feeds`,
    zone:
      verdict === 'stuck'
        ? `${first(named('zone', name))} is not released in truth`
        : `The command for ${named('zone', name)}`,
    site: 'The power or the connection of the whole site',
    tells_nothing: `Nothing in ${named('zone', name)} can report`,
    night: 'Too little light',
    not_heard_yet: 'The roll call is not complete',
  };
  return words[rival.mode];
}

/** What may stand behind a cause besides its rivals. */
export function alsoCouldBe(verdict: CauseVerdict, mode: Mode): string[] {
  const heard = verdict === 'not_shutting_down' && (mode === 'unit' || mode === 'string');
  return [...(heard ? ["A keep-alive from a neighbour's transmitter is heard"] : []), ...COULD_BE[mode]];
}
const COULD_BE: Record<Mode, readonly string[]> = {
  unit: [
    'The unit is defective',
    'A loose connector at the unit',
    'The unit sits elsewhere than the as-built says',
  ],
  string: [
    'An open connector or fuse in the home run',
    'The string sits on another input than the as-built says',
  ],
  weak_signal: ['Noise from an inverter', 'A long or looped conductor', 'A connector going bad'],
  transmitter_lost: [
    "The transmitter's supply or its coupling to the conductors",
    'Its zone is not released in truth',
  ],
  transmitter_on: ['The command in force was reported wrongly', "A neighbour's transmitter is heard"],
  cross_talk: [
    'Conductors of two systems run side by side',
    'The string is coupled to the wrong transmitter',
  ],
  gateway: ["The gateway's supply", 'Interference on its radio channel'],
  logger: ['Its supply or its network', 'The initiator cuts its supply too'],
  input: ["The inverter's capacitors hold it up", 'Another source feeds this input'],
  inverter: ['The inverter is switched off'],
  zone: ['The command in force was reported wrongly', 'The initiator does not act on the zone'],
  site: ['A power cut', 'The network of the site'],
  tells_nothing: ['Only a rated instrument at the home run can show it'],
  night: ['Snow on the modules', 'Judged again at sunrise'],
  not_heard_yet: ['A unit that has not answered passes full voltage by its type'],
};
