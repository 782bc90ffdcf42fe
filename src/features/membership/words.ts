import { groupsOf, unitName } from '../../components/placements/suspects';
import { listed } from '../../drawings/numbers';
import type { IsolationPage, IsolationRun } from '../../schemas/api/isolation';
import type { MembershipPage } from '../../schemas/api/membership';
import { membershipWordsWords } from '../../words/membership';

/** The sentences of the page on who is in which string. */

type Finding = IsolationRun['finding'];

export interface Said {
  heading: string;
  strong: string;
  rest: string;
}

/** A watch that runs, or the newest one where it found somebody who still stands where he doesn't belong. */
export function decisive(page: MembershipPage, isolation: IsolationPage): IsolationRun | null {
  if (isolation.open) return isolation.open;
  const [last] = isolation.runs;
  if (last?.finding.outcome !== 'told') return null;
  const stands = (u: Finding['units'][number]): boolean =>
    page.strings.some(
      (s) =>
        s.name === u.string &&
        s.slots.some((slot) => slot.position === u.position && slot.serial === u.serial),
    );
  const wrong = last.finding.units.filter((u) => u.fate === 'member_kept' || u.fate === 'other_dropped');
  return wrong.some(stands) ? last : null;
}

/** Names of units stay on one line. */
export const unbroken = (words: string): string => words.replace(/(\w)-(\d)/g, '$1\u2011$2');

/** Heading and sentence of the page: what isolating a string showed comes before what currents suggest. */
export function membershipWords(page: MembershipPage, isolation: IsolationPage): Said {
  const run = decisive(page, isolation);
  return run ? isolationWords(run) : currentWords(page);
}

function currentWords(page: MembershipPage): Said {
  const { counts, window, daylight } = page;
  const judged = counts.here + counts.elsewhere + counts.cantTell + counts.fitsNone;
  const hours = membershipWordsWords.theLastHours(window.hours);
  const groups = groupsOf(page.suspects.filter((s) => s.outcome !== 'fits_none'));
  const [first] = groups;
  const decide = membershipWordsWords.isolateOneStringTo;
  if (first) {
    const [a, b] = first;
    const heading = b
      ? membershipWordsWords.aAndBa(unitName(a), unitName(b), a.outcome, b.outcome, groups.length)
      : groups.length === 1
        ? a.otherString
          ? membershipWordsWords.carriesTheCurrentOf(unitName(a), a.otherString)
          : membershipWordsWords.doesNotCarryThe(unitName(a), a.string)
        : membershipWordsWords.unitsDontCarryTheir(counts.elsewhere);
    return {
      heading,
      strong: membershipWordsWords.readTheLabelsThere,
      rest: membershipWordsWords.ofCarryTheCurrent(counts.here, judged),
    };
  }
  if (judged === 0)
    return {
      heading: membershipWordsWords.noUnitHereTells,
      strong: '',
      rest: counts.mute > 0 ? membershipWordsWords.accordingToTheType : membershipWordsWords.theAsBuiltHolds,
    };
  if (window.steps === 0)
    return {
      heading: membershipWordsWords.cantTellYetNo,
      strong: membershipWordsWords.unitsReportOnceThey,
      rest: membershipWordsWords.andWhileThereIs(hours),
    };
  if (window.withCurrent === 0)
    return {
      heading: membershipWordsWords.cantTellYetNoString,
      strong: daylight ? membershipWordsWords.theInvertersDidNot : membershipWordsWords.itIsNightThere,
      rest: membershipWordsWords.inComeBackWhen(hours),
    };
  if (counts.fitsNone > 0)
    return {
      heading: membershipWordsWords.noStringsCurrent(counts.fitsNone),
      strong: membershipWordsWords.itsMeasurementMayBe,
      rest: membershipWordsWords.ofCarryTheCurrent(counts.here, judged),
    };
  if (counts.cantTell === judged)
    return {
      heading: membershipWordsWords.cantTellForAny(judged),
      strong: membershipWordsWords.theStringsCurrentsAre,
      rest: membershipWordsWords.inOrTooFew(hours, decide),
    };
  if (counts.cantTell > 0)
    return {
      heading: membershipWordsWords.ofCarryTheCurrentOf(counts.here, judged),
      strong: membershipWordsWords.forItCantBe(counts.cantTell),
      rest: membershipWordsWords.stringsInTheSame(decide),
    };
  return {
    heading: membershipWordsWords.allUnitsCarryThe(judged),
    strong: '',
    rest: membershipWordsWords.byTheReportsOf(hours),
  };
}

const names = (finding: Finding, fate: Finding['units'][number]['fate']): string[] =>
  finding.units.filter((u) => u.fate === fate).map((u) => unitName(u));

const REASONS: Record<NonNullable<Finding['reason']>, string> = {
  no_current_before: membershipWordsWords.itCarriedHardlyAny,
  no_reports: membershipWordsWords.nothingOfItWas,
  everything_stopped: membershipWordsWords.everyStringStoppedTogether,
  too_little_current: membershipWordsWords.tooLittleLightCurrents,
  nothing_beside: membershipWordsWords.noOtherStringReports,
};

/** What a watch shows, in a heading and a sentence. */
export function isolationWords(run: IsolationRun): Said {
  const { finding, stringName: string } = run;
  const over = run.stoppedAt !== null;
  switch (finding.outcome) {
    case 'watching':
      return over
        ? {
            heading: membershipWordsWords.nobodysCurrentWentTo(string),
            strong:
              run.stoppedBy === null
                ? membershipWordsWords.itsHalfHourWas
                : membershipWordsWords.theWatchWasStopped,
            rest: membershipWordsWords.nothingIsConcluded,
          }
        : {
            heading: membershipWordsWords.watchingNothingHasFallen(string),
            strong: membershipWordsWords.mayIsolateItNow(run.personOnSite),
            rest: membershipWordsWords.byItsLoadBreak,
          };
    case 'cant_tell':
      return {
        heading: membershipWordsWords.cantTell(string),
        strong: '',
        rest: finding.reason ? REASONS[finding.reason] : '',
      };
    case 'other_string':
      return {
        heading: membershipWordsWords.notButWentTo(string, listed(finding.strings)),
        strong: membershipWordsWords.anotherStringWasIsolated,
        rest: membershipWordsWords.orTheDrawingHas,
      };
    case 'several_strings':
      return {
        heading: membershipWordsWords.wentToZeroTogether(listed(finding.strings)),
        strong: membershipWordsWords.moreThanOneString,
        rest: membershipWordsWords.whoIsInWhich,
      };
    case 'input_only':
      return {
        heading: membershipWordsWords.theInputLostPart(string),
        strong: membershipWordsWords.itsUnitsReportNothing,
        rest: membershipWordsWords.theInputShowsThat,
      };
    case 'told': {
      const gone = names(finding, 'member_dropped');
      const kept = names(finding, 'member_kept');
      const joined = names(finding, 'other_dropped');
      const untold = finding.units.filter((u) => u.string === string && u.fate === 'not_told').length;
      if (kept.length === 0 && joined.length === 0)
        return {
          heading:
            untold === 0
              ? membershipWordsWords.everyUnitOf(gone.length, string)
              : membershipWordsWords.inToldNothing(gone.length, string, untold),
          strong: '',
          rest: membershipWordsWords.noUnitOfAnother,
        };
      return {
        heading: [
          kept.length > 0 ? membershipWordsWords.keptCurrent(listed(kept), kept.length) : '',
          joined.length > 0 ? membershipWordsWords.wentToZeroWith(listed(joined), string) : '',
        ]
          .filter(Boolean)
          .join('; '),
        strong: [
          kept.length > 0 ? membershipWordsWords.notIn(listed(kept), kept.length, string) : '',
          joined.length > 0
            ? `${listed(joined)} ${joined.length === 1 ? membershipWordsWords.is : membershipWordsWords.are}`
            : '',
        ]
          .filter(Boolean)
          .join('; ')
          .concat('.'),
        rest: membershipWordsWords.ofItConfirmed(gone.length),
      };
    }
  }
}
