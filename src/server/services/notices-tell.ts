import { decide } from '../../domain/notices/decide';
import { TOLD_EVENTS, toldOf, type Told } from '../../domain/notices/event';
import { afterEvent, afterWait, type SubjectState, type SubjectStep } from '../../domain/notices/subject';
import { noticeWords } from '../../domain/notices/words';
import { asIngest, type Tx } from '../db/transaction';
import { horizon } from '../queries/horizon';
import {
  causesByRef,
  dueSubjects,
  eventsAfter,
  eventsById,
  gatewayExplained,
  hazardsAhead,
  lockReader,
  loggerGone,
  moveReader,
  openersOf,
  recipients,
  saveSubject,
  somethingToTell,
  subjectStates,
  waitsBeyond,
  type CauseFacts,
  type RecipientRow,
  type TellEvent,
} from '../queries/notices-tell';
import { addNotice, markCameBack, markOver, tellNoticed } from '../queries/notices-write';
import { hrefOf } from './notice-links';
import { recipientOf } from './notice-people';
import { pictureOf, together, writeLetter, type KeptPicture, type Telling } from './notice-letters';
import { addCalls } from './webhook-calls';

/**
 * Makes notices, letters and calls of events. One transaction moves the cursor and writes everything that follows from
 * the events that it passes: killed anywhere, it did all of it or nothing. One process reads at a time.
 */
const READER = 'notices';
const EVENTS_A_ROUND = 300;

export interface Round {
  events: number;
  notices: number;
  letters: number;
  calls: number;
  /** There is more to read now. */
  more: boolean;
  /** There is something to tell that waits for a transaction which still runs. */
  held: boolean;
}
const NOTHING: Round = { events: 0, notices: 0, letters: 0, calls: 0, more: false, held: false };

interface Scene {
  now: Date;
  causes: Map<string, CauseFacts>;
  openers: Map<string, number>;
  people: RecipientRow[];
  states: Map<string, SubjectState>;
  pictures: Map<string, KeptPicture | null>;
  /** Letters of this round, by whom they go to and what they are about. */
  letters: Map<string, { person: RecipientRow; tellings: Telling[] }>;
}
interface ToTell {
  told: Told;
  event: TellEvent;
}

const text = (value: unknown): string => (typeof value === 'string' ? value : '');
const causeOf = (scene: Scene, event: TellEvent): CauseFacts | null =>
  scene.causes.get(text(event.detail.cause)) ?? null;

/** One round. @returns nothing done where another process is at it */
export function tellRound(now: Date): Promise<Round> {
  return asIngest(async (tx) => {
    const { told: pending, lags } = await somethingToTell(tx, READER, TOLD_EVENTS, now);
    if (!pending && !lags) return NOTHING;
    const cursor = await lockReader(tx, READER);
    if (!cursor) return NOTHING;
    const { below } = await horizon(tx);
    const events = await eventsAfter(tx, cursor, below, TOLD_EVENTS, EVENTS_A_ROUND);
    const known = new Set(events.map((e) => e.id));
    const ahead = (await hazardsAhead(tx, cursor)).filter((e) => !known.has(e.id));
    const due = await dueSubjects(tx, now);
    const waited = await eventsById(
      tx,
      due.flatMap((d) => d.state.waiting?.event ?? []),
    );
    const all = [...events, ...ahead];
    const scene = await sceneOf(tx, [...all, ...waited.values()], now);
    const toTell: ToTell[] = [];
    for (const event of all)
      for (const told of toldOf(event))
        if (await isTold(tx, scene, told, event)) toTell.push({ told, event });
    for (const { subject } of due) toTell.push(...(await settle(tx, scene, subject, waited)));
    const count = { events: events.length, notices: 0, letters: 0 };
    const noticed = new Set<number>();
    for (const one of toTell) count.notices += await tellEverybody(tx, scene, one, noticed);
    count.letters = await writeLetters(tx, scene);
    const calls = await addCalls(tx, all, scene.causes);
    const more = events.length === EVENTS_A_ROUND;
    const last = events.at(-1);
    if (more && last) await moveReader(tx, READER, { xid: last.xid, id: String(last.id) });
    else if (BigInt(below) > BigInt(cursor.xid)) await moveReader(tx, READER, { xid: below, id: '0' });
    await tellNoticed(tx, noticed);
    return { ...count, calls, more, held: await waitsBeyond(tx, below, TOLD_EVENTS) };
  });
}

async function sceneOf(tx: Tx, events: readonly TellEvent[], now: Date): Promise<Scene> {
  const named = (key: string): string[] => [
    ...new Set(events.flatMap(({ detail }) => (typeof detail[key] === 'string' ? [detail[key]] : []))),
  ];
  const told = events.flatMap((e) => toldOf(e));
  return {
    now,
    causes: await causesByRef(tx, named('cause')),
    openers: await openersOf(tx, named('case')),
    people: await recipients(tx, { organisationIds: [...new Set(events.map((e) => e.organisationId))] }),
    states: await subjectStates(tx, [...new Set(told.flatMap((t) => t.subject ?? []))]),
    pictures: new Map(),
    letters: new Map(),
  };
}

/** Whether what came is there by now: judged anew as it is told, not by what was so when it was written. */
async function holds(tx: Tx, scene: Scene, told: Told, event: TellEvent): Promise<boolean> {
  if (event.kind.startsWith('cause_')) {
    const cause = causeOf(scene, event);
    return cause !== null && cause.closedAt === null;
  }
  if (told.kind === 'logger') return loggerGone(tx, event.siteId, text(event.detail.logger));
  if (event.detail.gateway) return !(await gatewayExplained(tx, event.siteId, text(event.detail.gateway)));
  return true;
}

/** What an event means for its subject is kept; says whether people are told of it now. */
async function isTold(tx: Tx, scene: Scene, told: Told, event: TellEvent): Promise<boolean> {
  const { subject, phase } = told;
  if (subject === null || phase === 'happens') return true;
  const step = afterEvent(
    scene.states.get(subject) ?? null,
    {
      id: event.id,
      phase,
      at: event.at,
      waitS: told.waitS,
      // what has to last is looked at when it has lasted
      holds: phase === 'comes' && (told.waitS > 0 || (await holds(tx, scene, told, event))),
    },
    scene.now,
  );
  await keep(tx, scene, subject, event, step);
  return step.tell !== null;
}

async function keep(
  tx: Tx,
  scene: Scene,
  subject: string,
  event: TellEvent,
  step: SubjectStep,
): Promise<void> {
  scene.states.set(subject, step.state);
  await saveSubject(tx, { subject, organisationId: event.organisationId, siteId: event.siteId }, step.state);
  if (step.cameBack) await tellNoticed(tx, await markCameBack(tx, subject, step.state.came));
  if (step.tell === 'goes') await markOver(tx, subject, scene.now);
}

/** What waited and is due: told where it still holds. */
async function settle(
  tx: Tx,
  scene: Scene,
  subject: string,
  waited: ReadonlyMap<number, TellEvent>,
): Promise<ToTell[]> {
  const state = scene.states.get(subject);
  const event = state?.waiting && waited.get(state.waiting.event);
  if (!state || !event) return [];
  const told = toldOf(event).find((t) => t.subject === subject);
  if (!told) return [];
  const step = afterWait(state, await holds(tx, scene, told, event), scene.now);
  await keep(tx, scene, subject, event, step);
  return step.tell ? [{ told, event }] : [];
}

function addressees({ told, event }: ToTell, scene: Scene): RecipientRow[] {
  const here = scene.people.filter((p) => p.organisationId === event.organisationId);
  const { to } = told;
  if (to === 'everybody') return here;
  const ids = to === 'opener' ? [scene.openers.get(text(event.detail.case))] : to;
  return here.filter((p) => ids.includes(p.personId));
}

/** Who did it: by number where the event has one, else by a name that only one person has. */
function doerOf({ event }: ToTell, people: readonly RecipientRow[]): number | null {
  const { personId, person } = event.detail;
  if (typeof personId === 'number') return personId;
  const named = people.filter((p) => p.organisationId === event.organisationId && p.name === person);
  return named.length === 1 ? (named[0]?.personId ?? null) : null;
}

async function tellEverybody(tx: Tx, scene: Scene, one: ToTell, noticed: Set<number>): Promise<number> {
  const { told, event } = one;
  const cause = causeOf(scene, event);
  const words = noticeWords(told, event, cause);
  const byPerson = doerOf(one, scene.people);
  let notices = 0;
  for (const person of addressees(one, scene)) {
    const decision = decide(
      { kind: told.kind, siteId: event.siteId, byPerson, inProductOnly: told.inProductOnly },
      recipientOf(person),
      scene.now,
    );
    if (decision.how === 'nothing') continue;
    const eventKey = `event:${event.id}`;
    const href = hrefOf(told, event, person.role);
    const isNew = await addNotice(tx, {
      organisationId: event.organisationId,
      personId: person.personId,
      siteId: event.siteId,
      eventKey,
      eventId: event.id,
      kind: told.kind,
      // what is over, or merely happened, does not last
      subject: told.phase === 'comes' ? told.subject : null,
      headline: words.headline,
      body: words.body,
      href,
      hazard: told.kind === 'hazard' && told.phase === 'comes',
      createdAt: scene.now,
      letterDue: decision.how === 'gathered' ? decision.at : null,
    });
    if (!isNew) continue;
    notices++;
    noticed.add(person.personId);
    if (decision.how !== 'now') continue;
    // several of one kind at one site, found at the same moment, are one letter
    const key = told.phase === 'comes' ? `${told.kind}:${event.siteId}` : `event:${event.id}`;
    const letter = scene.letters.get(`${person.personId}:${key}`) ?? { person, tellings: [] };
    letter.tellings.push({ told, event, words, cause, href });
    scene.letters.set(`${person.personId}:${key}`, letter);
  }
  return notices;
}

async function writeLetters(tx: Tx, scene: Scene): Promise<number> {
  let letters = 0;
  for (const { person, tellings } of scene.letters.values()) {
    const telling = together(tellings);
    if (!telling) continue;
    const picture = await pictureFor(tx, scene, telling);
    if (await writeLetter(tx, telling, person, `event:${telling.event.id}`, picture)) letters++;
  }
  return letters;
}

/** One drawing of the same strings a round, however many letters carry it. */
async function pictureFor(
  tx: Tx,
  scene: Scene,
  { told, event, cause }: Telling,
): Promise<KeptPicture | null> {
  if (!cause || told.phase !== 'comes') return null;
  const key = [...cause.stringIds].sort((a, b) => a - b).join(',');
  const known = scene.pictures.get(key);
  if (known !== undefined) return known;
  const made = await pictureOf(tx, event.organisationId, cause.stringIds, scene.now);
  scene.pictures.set(key, made);
  return made;
}
