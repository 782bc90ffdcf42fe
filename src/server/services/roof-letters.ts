import { figuresOf, sameDays } from '../../domain/output/day-figures';
import { lastPeriod, type Every, type LetterPeriod } from '../../domain/output/letter-period';
import { dayAfter, daysBetween, yearBefore } from '../../domain/output/period';
import { worthOf } from '../../domain/output/tariff';
import type { Actor } from '../../domain/access/permissions';
import { energy, money, percent } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import { publicUrl } from '../config';
import { asIngest, type Tx } from '../db/transaction';
import { found } from '../errors';
import { letter } from '../mail/letter';
import { lastTestOf } from '../queries/customer';
import { siteSums, tariffsOf } from '../queries/figures';
import { addMessage } from '../queries/outbox';
import {
  askedLetters,
  askForLetter,
  endLetter,
  letterAsked,
  takeLetterTurn,
  type AskedLetter,
} from '../queries/roof-letters';
import { visibleSite } from '../queries/visible-site';
import { roofLetters } from '../../words/letters-sent';

/** The letter about a roof, each week or month, for whoever asked for it. */

/** The hour at the site from which a letter is written: the night's sums are in by then. */
const FROM_HOUR = 7;
const NO_DATA_BELOW = 0.95;

/** How often a person gets a letter about a site; null: never. @throws AppError not_found */
export const letterOf = async (tx: Tx, actor: Actor, ref: string): Promise<Every | null> =>
  letterAsked(tx, found(await visibleSite(tx, ref), 'site').id, actor.personId);

/** Sets how often a person gets a letter about a site; null ends it. @throws AppError not_found */
export async function chooseLetter(
  tx: Tx,
  actor: Actor,
  ref: string,
  every: Every | null,
  at: Date,
): Promise<{ every: Every | null }> {
  const site = found(await visibleSite(tx, ref), 'site');
  const before = await letterAsked(tx, site.id, actor.personId);
  if (every === null) await endLetter(tx, site.id, actor.personId);
  else if (every !== before)
    await askForLetter(tx, {
      siteId: site.id,
      personId: actor.personId,
      every,
      lastPeriod: lastPeriod(every, localDay(at, site.timeZone)).key,
    });
  return { every };
}

const localDay = (at: Date, timeZone: string): string =>
  new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).format(
    at,
  );

/**
 * Writes the letters that are due, each in a transaction of its own with the mark that it was written: once, however
 * often this runs and wherever it is killed.
 */
export async function writeRoofLetters(at: Date): Promise<{ written: number }> {
  const asked = await asIngest((tx) => askedLetters(tx, at));
  let written = 0;
  for (const one of asked) {
    const period = lastPeriod(one.every, one.today);
    if (period.key <= one.lastPeriod || (one.today === period.before && one.hour < FROM_HOUR)) continue;
    written += await asIngest(async (tx) => {
      if (!(await takeLetterTurn(tx, one, period.key))) return 0;
      return Number(await writeLetter(tx, one, period));
    });
  }
  return { written };
}

async function writeLetter(tx: Tx, one: AskedLetter, period: LetterPeriod): Promise<boolean> {
  const parts = await partsOf(tx, one, period);
  const { text, html } = letter(parts);
  return addMessage(tx, {
    organisationId: one.organisationId,
    personId: one.personId,
    siteId: one.siteId,
    kind: 'roof_letter',
    eventKey: `roof_letter:${one.siteRef}:${one.every}:${period.key}`,
    to: { address: one.email, name: one.personName },
    subject: parts.finding,
    text,
    html,
  });
}

async function partsOf(tx: Tx, one: AskedLetter, period: LetterPeriod) {
  const asked = daysBetween(period.from, period.before);
  const days = await siteSums(tx, one.siteId, period);
  const now = figuresOf(days, asked);
  const earlier = await siteSums(tx, one.siteId, {
    from: yearBefore(period.from),
    before: dayAfter(yearBefore(dayAfter(period.before, -1))),
  });
  // a day without data is held against nothing
  const same = earlier.length === asked ? sameDays(days, earlier) : null;
  const prices = (await tariffsOf(tx, [one.siteId])).get(one.siteId) ?? [];
  const worth = worthOf(
    days.map((d) => ({ day: d.day, energyKWh: d.energyAc / 1000 })),
    prices,
  );
  const best = days.reduce<(typeof days)[number] | null>(
    (b, d) => (b === null || d.energyAc > b.energyAc ? d : b),
    null,
  );
  const test = await lastTestOf(tx, one.siteId);
  const made = energy(now.energyKWh * 1000);
  const finding =
    days.length === 0
      ? roofLetters.noDataHeading(one.siteName, period.label)
      : roofLetters.madeIn(one.siteName, made, period.label);
  return {
    greeting: roofLetters.helloPersonName(one.personName),
    finding,
    paragraphs: [
      days.length === 0
        ? roofLetters.nothingKnown(one.organisation)
        : [
            same !== null && same.before > 0
              ? roofLetters.yearBefore(changeSentence(same), same.days, asked)
              : '',
            now.completeness < NO_DATA_BELOW ? roofLetters.readingsMissing(now.completeness) : '',
            now.lostMinutes > 0
              ? roofLetters.stoodStill(now.lostMinutes, Math.round(now.lostMinutes / 60), now.lostMinutesGrid)
              : '',
          ]
            .filter(Boolean)
            .join(' ') || roofLetters.nothingStoodOut,
    ],
    figures: [
      [roofLetters.energy, days.length === 0 ? roofLetters.notKnown : made],
      ...(best
        ? [[roofLetters.bestDay, `${longDate(`${best.day}T12:00:00Z`, 'UTC')}, ${energy(best.energyAc)}`]]
        : []),
      ...(one.currency && worth ? [[roofLetters.worthAtYourPrice, money(worth.money, one.currency)]] : []),
      [roofLetters.readingsThatCame, percent(now.completeness)],
      [
        roofLetters.lastShutdownTest,
        test
          ? `${longDate(test.at, 'UTC')}, ${test.result === 'passed' ? 'passed' : test.result === 'failed' ? roofLetters.testNotPassed : roofLetters.testNotMeasured}`
          : roofLetters.noneOnRecord,
      ],
    ] as [string, string][],
    caution: {
      strong: roofLetters.modulesStayLiveIn,
      rest: roofLetters.evenShutDownEvery,
    },
    action: { words: roofLetters.lookAtYourRoof, href: `${publicUrl()}${paths.customer(one.siteRef)}` },
    footer: roofLetters.whyThisLetter(one.organisation, one.phone, one.every),
    wayOut: {
      words: roofLetters.chooseHowOftenIt,
      href: `${publicUrl()}${paths.customer(one.siteRef)}#letter`,
    },
  };
}

function changeSentence(same: { now: number; before: number }): string {
  const change = same.now / same.before - 1;
  if (Math.abs(change) < 0.02) return roofLetters.aboutAsMuch;
  return roofLetters.comparedWith(Math.abs(change), change);
}
