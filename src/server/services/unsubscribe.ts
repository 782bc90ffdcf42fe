import { howOf, HOWS, KINDS, kindsOf, type How, type NoticeKind } from '../../domain/notices/kinds';
import { takeTokenTry } from '../auth/limits';
import { actFor, asSignIn, type Tx } from '../db/transaction';
import { AppError } from '../errors';
import { personOfLetter, saveRules, type SignedOutPerson } from '../queries/notice-choices';
import { addAuditEntry } from '../queries/people';
import { isSigned, readToken } from './notice-links';
import { unsubscribeWords } from '../../words/refusals-people';

/** The way out of letters: by the link at their foot, signed out too, and back again. */

export interface WayOut {
  name: string;
  email: string;
  /** In words: "Causes", "The day’s letter". */
  what: string;
  /** What it would change, or has changed: KIND:HOW pairs, for the way back. */
  letters: string[];
  /** Nothing of it is sent by letter any more. */
  ended: boolean;
}

const gone = () =>
  new AppError('not_found', {
    message: unsubscribeWords.endsNone,
  });

/** A wrong token counts against whoever tries; a right one never, however many letters one mail provider answers for. */
async function withToken<T>(address: string, work: (tx: Tx) => Promise<T>): Promise<T> {
  try {
    return await asSignIn(work);
  } catch (error) {
    if (error instanceof AppError && error.kind === 'not_found') await takeTokenTry(address);
    throw error;
  }
}

async function opened(
  tx: Tx,
  token: string,
): Promise<{ person: SignedOutPerson; kinds: NoticeKind[]; what: string }> {
  const parts = readToken(token);
  const person = parts && (await personOfLetter(tx, parts.person));
  if (!parts || !person || !isSigned(parts, person.key)) throw gone();
  const mine = kindsOf(person.role).filter((kind) => !KINDS[kind].fixed);
  if (parts.of === 'gathered')
    return {
      person,
      what: unsubscribeWords.dayLetter,
      kinds: mine.filter((kind) => howOf(kind, person.role, person.rules) === 'digest'),
    };
  const kinds = mine.filter((kind) => kind === parts.of);
  const [kind] = kinds;
  if (!kind) throw gone();
  return { person, what: KINDS[kind].name, kinds };
}

const byLetter = (how: How): boolean => how === 'at_once' || how === 'digest';

function wayOut(
  { name, email, role, rules }: SignedOutPerson,
  what: string,
  kinds: readonly NoticeKind[],
): WayOut {
  const letters = kinds.flatMap((kind) => {
    const how = howOf(kind, role, rules);
    return byLetter(how) ? [`${kind}:${how}`] : [];
  });
  return { name, email, what, letters, ended: letters.length === 0 };
}

/** What a link would end. @throws AppError not_found · too_many */
export function openWayOut(token: string, address: string): Promise<WayOut> {
  return withToken(address, async (tx) => {
    const { person, what, kinds } = await opened(tx, token);
    return wayOut(person, what, kinds);
  });
}

/** Ends these letters; what they told of is shown in the product from now on. Twice is once. @throws as above */
export function takeWayOut(token: string, address: string, at: Date): Promise<WayOut> {
  return change(token, address, at, (kinds, person) =>
    kinds.flatMap((kind): [NoticeKind, How][] =>
      byLetter(howOf(kind, person.role, person.rules)) ? [[kind, 'in_product']] : [],
    ),
  );
}

/** Puts back what a way out changed. @param letters KIND:HOW pairs as `WayOut` had them */
export function undoWayOut(
  token: string,
  letters: readonly string[],
  address: string,
  at: Date,
): Promise<WayOut> {
  return change(token, address, at, (_, person) =>
    letters.flatMap((pair): [NoticeKind, How][] => {
      const [name, chosen] = pair.split(':');
      const kind = kindsOf(person.role).find((k) => k === name);
      const how = HOWS.find((h) => h === chosen);
      return kind && how && byLetter(how) && !KINDS[kind].fixed ? [[kind, how]] : [];
    }),
  );
}

function change(
  token: string,
  address: string,
  at: Date,
  changes: (kinds: readonly NoticeKind[], person: SignedOutPerson) => [NoticeKind, How][],
): Promise<WayOut> {
  return withToken(address, async (tx) => {
    const { person, what, kinds } = await opened(tx, token);
    const list = changes(kinds, person);
    const before = wayOut(person, what, kinds);
    if (list.length === 0) return { ...before, letters: [] };
    const rules = { ...person.rules };
    for (const [kind, how] of list) {
      if (KINDS[kind].defaults[person.role] === how) delete rules[kind];
      else rules[kind] = how;
    }
    await actFor(tx, person.organisationId);
    await saveRules(tx, person.personId, rules, at);
    await addAuditEntry(tx, {
      organisationId: person.organisationId,
      personId: person.personId,
      address,
      action: 'account.notices_changed',
      subject: 'own account, by the link in a letter',
      before: { rules: person.rules },
      after: { rules },
    });
    return { ...before, ended: list.every(([, how]) => !byLetter(how)) };
  });
}
