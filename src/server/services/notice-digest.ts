import { adviceFor } from '../../domain/notices/advice';
import { KINDS, type NoticeKind } from '../../domain/notices/kinds';
import { clockOrDate } from '../../drawings/times';
import { publicUrl } from '../config';
import { asIngest, type Tx } from '../db/transaction';
import { letter, type LetterSection } from '../mail/letter';
import { recipients, type RecipientRow } from '../queries/notices-tell';
import { dueLetters, markLettered, type GatheredLine } from '../queries/notices-write';
import { addMessage } from '../queries/outbox';
import { CAUTION, choicesLine, drawn, greetingOf, pictureOf, wayOutOf } from './notice-letters';
import { noticeDigest } from '../../words/letters-sent';

/** The letter that gathers several: the day's, and the one after quiet hours. */

const LETTERS_A_RUN = 1000;

/** Writes every gathered letter that is due, one transaction each. @returns how many were written */
export async function writeGathered(now: Date): Promise<number> {
  let letters = 0;
  for (let i = 0; i < LETTERS_A_RUN; i++) {
    const outcome = await asIngest((tx) => writeOne(tx, now));
    if (outcome === 'none') break;
    if (outcome === 'written') letters++;
  }
  return letters;
}

async function writeOne(tx: Tx, now: Date): Promise<'none' | 'written' | 'dropped'> {
  const due = await dueLetters(tx, now);
  if (!due) return 'none';
  await markLettered(
    tx,
    due.lines.map((l) => l.id),
    now,
  );
  const [person] = await recipients(tx, { personIds: [due.personId] });
  // since it was noted the person may have left, or a site may have been taken away
  const lines = due.lines.filter(
    (l) => l.siteId === null || person?.role !== 'customer' || person.sites.includes(l.siteId),
  );
  if (!person || lines.length === 0) return 'dropped';
  const open = lines.filter((l) => isTodo(l));
  const picture = await pictureOf(
    tx,
    person.organisationId,
    [...new Set(open.flatMap((l) => l.stringIds ?? []))],
    now,
  );
  const words = gatheredWords(lines, person, now);
  const { url, wayOut } = wayOutOf(person, 'gathered');
  const { text, html } = letter({
    greeting: greetingOf(person),
    finding: words.finding,
    paragraphs: words.paragraphs,
    ...(open.length > 0 && { caution: CAUTION }),
    ...drawn(picture),
    sections: words.sections,
    footer: noticeDigest.youGetThisLetter(person.organisationName, choicesLine()),
    wayOut: { ...wayOut, words: noticeDigest.noMoreOfThese },
  });
  await addMessage(tx, {
    organisationId: person.organisationId,
    personId: person.personId,
    siteId: null,
    kind: 'gathered',
    eventKey: `gathered:${person.personId}:${due.lines.at(-1)?.id ?? ''}`,
    to: { address: person.email, name: person.name },
    subject: words.finding,
    text,
    html,
    pictureId: picture?.id ?? null,
    unsubscribeUrl: url,
  });
  return 'written';
}

const isTodo = (line: GatheredLine): boolean =>
  line.causeKind !== null && line.subject !== null && !line.over;

function money(wh: number, line: Pick<GatheredLine, 'price' | 'currency'>): string {
  if (line.price === null || line.currency === null) return '';
  const worth = new Intl.NumberFormat('en-GB', { style: 'currency', currency: line.currency }).format(
    (wh / 1000) * line.price,
  );
  return `, ${worth}`;
}
const came = (line: GatheredLine): string => (line.came === 0 ? '' : noticeDigest.itWentAndCame(line.came));

function todoItem(line: GatheredLine): LetterSection['items'][number] {
  const advice = adviceFor(line.causeKind ?? '', line.sharedPart?.kind ?? null);
  return {
    title: `${line.siteName}: ${line.headline}`,
    href: publicUrl() + line.href,
    lines: [
      noticeDigest.toDo(advice.today, came(line)),
      line.lossWhDay
        ? noticeDigest.worthAboutDay(line.lossWhDay, money(line.lossWhDay, line))
        : noticeDigest.worthWhatItCosts,
      noticeDigest.onTheLadder(advice.ladder),
    ],
  };
}

function otherItem(line: GatheredLine, person: RecipientRow, now: Date): LetterSection['items'][number] {
  return {
    title: [line.siteName, line.headline].filter(Boolean).join(': '),
    href: publicUrl() + line.href,
    lines: [
      ...(line.body && !line.over ? [line.body] : []),
      `${KINDS[line.kind].name}, ${clockOrDate(line.createdAt, now, person.timeZone)}.${came(line)}`,
    ],
  };
}

/** What is over goes last, cases and people before works. */
const ORDER: readonly NoticeKind[] = ['logger', 'silence', 'report', 'own_report', 'case_mine', 'case'];
const rank = (line: GatheredLine): number => {
  const at = ORDER.indexOf(line.kind);
  return at < 0 ? ORDER.length : at;
};

/** The heading, what follows from it, and the parts: to do, to know, over. */
export function gatheredWords(
  lines: readonly GatheredLine[],
  person: RecipientRow,
  now: Date,
): { finding: string; paragraphs: string[]; sections: LetterSection[] } {
  // the same cause may have been told twice: one line, the newer
  const bySubject = new Map(lines.map((l) => [l.subject ?? `#${l.id}`, l]));
  const kept = [...bySubject.values()];
  const todo = kept.filter(isTodo).sort((a, b) => (b.lossWhDay ?? 0) - (a.lossWhDay ?? 0));
  const over = kept.filter((l) => l.over && !isTodo(l));
  const other = kept.filter((l) => !isTodo(l) && !l.over).sort((a, b) => rank(a) - rank(b));
  const lossWh = todo.reduce((sum, l) => sum + (l.lossWhDay ?? 0), 0);
  const currencies = new Set(todo.filter((l) => l.lossWhDay && l.price !== null).map((l) => l.currency));
  const worth = todo.reduce((sum, l) => sum + ((l.lossWhDay ?? 0) / 1000) * (l.price ?? 0), 0);
  const [currency] = currencies;
  const amount =
    currency && worth > 0
      ? ` (${new Intl.NumberFormat('en-GB', { style: 'currency', currency }).format(worth)})`
      : '';
  const finding =
    todo.length > 0
      ? noticeDigest.thingsToDo(todo.length, lossWh, amount)
      : over.length > 0 && other.length === 0
        ? noticeDigest.nothingToDo(over.length)
        : noticeDigest.nothingHasToBeDone(kept.length);
  return {
    finding,
    paragraphs: [todo.length > 0 ? noticeDigest.dearestFirstEachSays : noticeDigest.whatCameAndWent],
    sections: [
      { title: noticeDigest.toDo2, items: todo.map(todoItem) },
      { title: noticeDigest.toKnow, items: other.map((l) => otherItem(l, person, now)) },
      { title: noticeDigest.overByItself, items: over.map((l) => otherItem(l, person, now)) },
    ].filter((s) => s.items.length > 0),
  };
}
