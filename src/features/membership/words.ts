import { groupsOf, unitName } from '../../components/placements/suspects';
import { counted, countAtStart, listed, number } from '../../drawings/numbers';
import type { IsolationPage, IsolationRun } from '../../schemas/api/isolation';
import type { MembershipPage } from '../../schemas/api/membership';

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
  const hours = `the last ${window.hours} hours`;
  const groups = groupsOf(page.suspects.filter((s) => s.outcome !== 'fits_none'));
  const [first] = groups;
  const decide = 'Isolate one string to be certain.';
  if (first) {
    const [a, b] = first;
    const heading = b
      ? `${unitName(a)} and ${unitName(b)} ${a.outcome === 'elsewhere' && b.outcome === 'elsewhere' ? 'look' : 'may be'} exchanged${groups.length > 1 ? `, and ${counted(groups.length - 1, 'more place')} ${groups.length === 2 ? 'doesn’t' : 'don’t'} fit` : ''}`
      : groups.length === 1
        ? a.otherString
          ? `${unitName(a)} carries the current of ${a.otherString}`
          : `${unitName(a)} does not carry the current of ${a.string}`
        : `${countAtStart(counts.elsewhere)} units don’t carry their string’s current`;
    return {
      heading,
      strong: 'Read the labels there before anything is changed.',
      rest: `${number(counts.here)} of ${counted(judged, 'unit')} carry the current of their own string.`,
    };
  }
  if (judged === 0)
    return {
      heading: 'No unit here tells its current',
      strong: '',
      rest:
        counts.mute > 0
          ? 'According to the type entered its units report nothing: only the input’s current falls when a string is isolated.'
          : 'The as-built holds no units yet.',
    };
  if (window.steps === 0)
    return {
      heading: 'Can’t tell yet: no unit has told its current',
      strong: 'Units report once they have answered the roll call',
      rest: `and while there is light; none did in ${hours}.`,
    };
  if (window.withCurrent === 0)
    return {
      heading: 'Can’t tell yet: no string carried current',
      strong: daylight ? 'The inverters did not run' : 'It is night there',
      rest: `in ${hours}. Come back when they have run for half an hour.`,
    };
  if (counts.fitsNone > 0)
    return {
      heading: `${countAtStart(counts.fitsNone)} ${counts.fitsNone === 1 ? 'unit fits' : 'units fit'} no string’s current`,
      strong: 'Its measurement may be wrong.',
      rest: `${number(counts.here)} of ${counted(judged, 'unit')} carry the current of their own string.`,
    };
  if (counts.cantTell === judged)
    return {
      heading: `Can’t tell for any of ${counted(judged, 'unit')}`,
      strong: 'The strings’ currents are too alike',
      rest: `in ${hours}, or too few. ${decide}`,
    };
  if (counts.cantTell > 0)
    return {
      heading: `${number(counts.here)} of ${counted(judged, 'unit')} carry the current of their string`,
      strong: `For ${number(counts.cantTell)} it can’t be told:`,
      rest: `strings in the same light carry the same current. ${decide}`,
    };
  return {
    heading: `All ${number(judged)} units carry the current of their string`,
    strong: '',
    rest: `By the reports of ${hours}.`,
  };
}

const names = (finding: Finding, fate: Finding['units'][number]['fate']): string[] =>
  finding.units.filter((u) => u.fate === fate).map((u) => unitName(u));

const REASONS: Record<NonNullable<Finding['reason']>, string> = {
  no_current_before: 'It carried hardly any current before: an isolated string can’t be seen.',
  no_reports: 'Nothing of it was reported before the start.',
  everything_stopped: 'Every string stopped together: the inverter, the grid or dusk, and no single string.',
  too_little_current: 'Too little light: currents are too small to part zero from the rest.',
  nothing_beside: 'No other string reports beside it, so a cloud and an open switch look alike.',
};

/** What a watch shows, in a heading and a sentence. */
export function isolationWords(run: IsolationRun): Said {
  const { finding, stringName: string } = run;
  const over = run.stoppedAt !== null;
  switch (finding.outcome) {
    case 'watching':
      return over
        ? {
            heading: `${string}: nobody’s current went to zero`,
            strong: run.stoppedBy === null ? 'Its half hour was up.' : 'The watch was stopped before.',
            rest: 'Nothing is concluded.',
          }
        : {
            heading: `Watching ${string}: nothing has fallen yet`,
            strong: `${run.personOnSite} may isolate it now,`,
            rest: 'by its load-break device. Two reports in a row decide.',
          };
    case 'cant_tell':
      return {
        heading: `${string}: can’t tell`,
        strong: '',
        rest: finding.reason ? REASONS[finding.reason] : '',
      };
    case 'other_string':
      return {
        heading: `Not ${string} but ${listed(finding.strings)} went to zero`,
        strong: 'Another string was isolated than the one named,',
        rest: 'or the drawing has their names exchanged. Check the mark on the switch.',
      };
    case 'several_strings':
      return {
        heading: `${listed(finding.strings)} went to zero together`,
        strong: 'More than one string was isolated:',
        rest: 'who is in which of them this does not say. Isolate one alone.',
      };
    case 'input_only':
      return {
        heading: `The input lost ${string}’s part`,
        strong: 'Its units report nothing:',
        rest: 'the input shows that a string of it was isolated, and never which units are in it.',
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
              ? `All ${number(gone.length)} units of ${string} are in it`
              : `${counted(gone.length, 'unit')} ${gone.length === 1 ? 'is' : 'are'} in ${string}, ${number(untold)} told nothing`,
          strong: '',
          rest: 'No unit of another string went to zero with it.',
        };
      return {
        heading: [
          kept.length > 0 ? `${listed(kept)} kept ${kept.length === 1 ? 'its' : 'their'} current` : '',
          joined.length > 0 ? `${listed(joined)} went to zero with ${string}` : '',
        ]
          .filter(Boolean)
          .join('; '),
        strong: [
          kept.length > 0 ? `${listed(kept)} ${kept.length === 1 ? 'is' : 'are'} not in ${string}` : '',
          joined.length > 0 ? `${listed(joined)} ${joined.length === 1 ? 'is' : 'are'}` : '',
        ]
          .filter(Boolean)
          .join('; ')
          .concat('.'),
        rest: `${counted(gone.length, 'other unit')} of it ${gone.length === 1 ? 'is' : 'are'} confirmed.`,
      };
    }
  }
}
