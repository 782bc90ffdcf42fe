import { createHash } from 'node:crypto';
import { adviceFor } from '../../domain/notices/advice';
import { KINDS } from '../../domain/notices/kinds';
import { liveWords, stringsInWords } from '../../domain/notices/words';
import { fullTime } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import { publicUrl } from '../config';
import type { Tx } from '../db/transaction';
import { log } from '../log';
import { letter, type LetterParts } from '../mail/letter';
import { PICTURE_WIDTH, stringsPicture } from '../mail/letter-picture';
import { PICTURE_CID } from '../mail/send-outbox';
import type { CauseFacts, RecipientRow, TellEvent } from '../queries/notices-tell';
import { stringsNow } from '../queries/now';
import { addMessage, keepPicture } from '../queries/outbox';
import type { Told } from '../../domain/notices/event';
import { unsubscribeUrl, type LetterOf } from './notice-links';
import { noticeLetters } from '../../words/letters-sent';

/** A letter about one thing, at once. */

const STRINGS_DRAWN = 12;

export interface KeptPicture {
  id: string;
  alt: string;
}

/** The drawing of strings as they stand, kept for letters; null where there is nothing to draw. */
export async function pictureOf(
  tx: Tx,
  organisationId: number,
  stringIds: readonly number[],
  at: Date,
): Promise<KeptPicture | null> {
  if (stringIds.length === 0) return null;
  const strings = await stringsNow(tx, at, { stringIds: stringIds.slice(0, STRINGS_DRAWN) });
  try {
    const picture = await stringsPicture(strings);
    if (!picture) return null;
    const sha256 = createHash('sha256').update(picture.png).digest();
    return { id: await keepPicture(tx, organisationId, { sha256, png: picture.png }), alt: picture.alt };
  } catch (error) {
    // a database that fails ends the transaction anyway; a drawing that fails keeps no letter
    log.warn({ error }, 'a letter goes without its drawing');
    return null;
  }
}

export const drawn = (picture: KeptPicture | null): Pick<LetterParts, 'picture'> =>
  picture ? { picture: { cid: PICTURE_CID, width: PICTURE_WIDTH, alt: picture.alt } } : {};

export const greetingOf = (person: { name: string }): string => noticeLetters.helloPerson(person.name);

export interface Telling {
  told: Told;
  event: TellEvent;
  words: { headline: string; body: string };
  cause: CauseFacts | null;
  href: string;
  /** Each of several that one letter tells of. */
  each?: readonly Telling[];
}

/** Several of one kind at one site as one: what they share above, each below. */
export function together(tellings: readonly Telling[]): Telling | undefined {
  const [first] = tellings;
  if (!first || tellings.length === 1) return first;
  const causes = tellings.flatMap((t) => t.cause ?? []);
  const units = causes.flatMap((c) => c.units);
  const hazard = first.told.kind === 'hazard';
  return {
    ...first,
    words: {
      headline: noticeLetters.andMore(first.words.headline, tellings.length),
      body: hazard ? liveWords(units) : noticeLetters.foundAtTheSame,
    },
    cause: first.cause && {
      ...first.cause,
      units,
      stringIds: [...new Set(causes.flatMap((c) => c.stringIds))],
      evidence: '',
      lossWhDay: causes.reduce((sum, c) => sum + (c.lossWhDay ?? 0), 0) || null,
    },
    href: hazard ? paths.shutdown() : paths.site(first.event.site.ref),
    each: tellings,
  };
}

/** Each of several, with the way to its page. */
const eachOf = ({ each = [] }: Telling): Pick<LetterParts, 'sections'> =>
  each.length === 0
    ? {}
    : {
        sections: [
          {
            title: noticeLetters.each,
            items: each.map((t) => ({
              title: t.words.headline,
              lines: t.cause?.evidence ? [t.cause.evidence] : t.words.body ? [t.words.body] : [],
              href: publicUrl() + t.href,
            })),
          },
        ],
      };

/** Above whatever sends somebody to a roof. */
export const CAUTION = {
  strong: noticeLetters.shutdownIsNotIsolation,
  rest: noticeLetters.eachModuleAndIts,
};

function callWhom({ event }: Telling, person: RecipientRow): [string, string][] {
  const { contactName, contactPhone, switchPlace, place } = event.site;
  const contact = [contactName, contactPhone].filter(Boolean).join(', ');
  return [
    ...(contact ? [[noticeLetters.atTheSite, contact] as [string, string]] : []),
    ...(person.organisationPhone
      ? [[person.organisationName, person.organisationPhone] as [string, string]]
      : []),
    ...(switchPlace ? [[noticeLetters.shutdownSwitch, switchPlace] as [string, string]] : []),
    ...(place ? [[noticeLetters.where, place] as [string, string]] : []),
  ];
}

function hazardParts(telling: Telling, person: RecipientRow): LetterParts {
  const { words, cause, event, told } = telling;
  const over = told.phase === 'goes';
  const number = event.site.contactPhone || person.organisationPhone;
  const zone = person.timeZone;
  const figures: [string, string][] = [
    [noticeLetters.site, event.site.name],
    ...(cause && cause.units.length > 0
      ? [[noticeLetters.strings, stringsInWords(cause.units)] as [string, string]]
      : []),
    [noticeLetters.since, fullTime(cause?.since ?? event.at, zone)],
    ...callWhom(telling, person),
  ];
  return {
    greeting: greetingOf(person),
    finding: over ? words.headline : `${event.site.name}: ${words.headline}`,
    hazard: !over,
    paragraphs: [
      words.body,
      ...(over ? [] : [noticeLetters.callTheSiteNow(number)]),
      ...(cause?.evidence && !over ? [cause.evidence] : []),
    ],
    ...(number && !over && { call: { words: noticeLetters.callTheSite, number } }),
    caution: CAUTION,
    figures,
    action: {
      words: over ? noticeLetters.seeWhatHappened : noticeLetters.acknowledgeAndCall,
      href: publicUrl() + telling.href,
    },
    footer: noticeLetters.youGetThisLetter(person.organisationName, KINDS.hazard.fixed),
  };
}

function commonParts(telling: Telling, person: RecipientRow): LetterParts {
  const { told, event, words, cause } = telling;
  const advice =
    cause && told.phase === 'comes' ? adviceFor(cause.kind, cause.sharedPart?.kind ?? null) : null;
  const customer = person.role === 'customer';
  const figures: [string, string][] = [
    [noticeLetters.site, event.site.name],
    ...(cause && cause.units.length > 0
      ? [[noticeLetters.strings, stringsInWords(cause.units)] as [string, string]]
      : []),
    [
      told.phase === 'comes' && cause ? noticeLetters.since : noticeLetters.when,
      fullTime(cause?.since ?? event.at, person.timeZone),
    ],
    ...(cause?.lossWhDay
      ? [[noticeLetters.costsAbout, noticeLetters.lossADay(cause.lossWhDay)] as [string, string]]
      : []),
  ];
  return {
    greeting: greetingOf(person),
    finding: `${event.site.name}: ${words.headline}`,
    paragraphs: [
      words.body,
      ...(advice ? [advice.today, noticeLetters.onTheLadder(advice.ladder)] : []),
    ].filter(Boolean),
    ...(advice && { caution: CAUTION }),
    figures,
    action: {
      words: customer ? noticeLetters.seeYourSite : noticeLetters.lookAtIt,
      href: publicUrl() + telling.href,
    },
    footer: noticeLetters.youGetThisLetterBecause(
      customer,
      event.site.name,
      person.organisationName,
      KINDS[told.kind].name,
    ),
  };
}

/** What every letter of a kind that can be ended carries at its foot. */
export function wayOutOf(
  person: RecipientRow,
  of: LetterOf,
): { url: string; wayOut: { words: string; href: string } } {
  const url = unsubscribeUrl(person, of);
  return { url, wayOut: { words: noticeLetters.noMoreLettersLike, href: url } };
}

/** The link to one's choices, in words for the foot of a letter. */
export const choicesLine = (): string => noticeLetters.whatYouAreTold(publicUrl(), paths.accountNotices());

/** Puts the letter about one thing into the outbox. @returns whether it is new */
export async function writeLetter(
  tx: Tx,
  telling: Telling,
  person: RecipientRow,
  eventKey: string,
  picture: KeptPicture | null,
): Promise<boolean> {
  const { told, event, words } = telling;
  const hazard = told.kind === 'hazard';
  const parts = hazard ? hazardParts(telling, person) : commonParts(telling, person);
  const out = KINDS[told.kind].fixed ? null : wayOutOf(person, told.kind);
  const { text, html } = letter({
    ...parts,
    ...drawn(picture),
    ...eachOf(telling),
    footer: `${parts.footer} ${choicesLine()}`,
    ...(out && { wayOut: out.wayOut }),
  });
  const urgent = hazard && told.phase === 'comes';
  return addMessage(tx, {
    organisationId: person.organisationId,
    personId: person.personId,
    siteId: event.site.id,
    kind: told.kind,
    eventKey,
    to: { address: person.email, name: person.name },
    subject: `${urgent ? noticeLetters.notShuttingDown : ''}${event.site.name}: ${words.headline}`,
    text,
    html,
    pictureId: picture?.id ?? null,
    unsubscribeUrl: out?.url ?? null,
  });
}
