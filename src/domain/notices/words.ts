import { noticePlaces, noticeSaid } from '../../words/domain-notices';
import { eventWords } from '../verdicts/event-words';
import type { NoticeEvent, Told } from './event';

/** What a notice says: its line, and a sentence on what follows. */
export interface NoticeWords {
  headline: string;
  body: string;
}
/** The part of a cause that is known besides its event. */
export interface CauseWords {
  evidence: string;
  units: readonly { stringName: string; position: number | null }[];
}

const text = (value: unknown): string => (typeof value === 'string' ? value : '');

const NAMED_MAX = 6;

/** "B3 (positions 4 and 9) and B4": strings with the positions that are known. */
export function stringsInWords(units: CauseWords['units']): string {
  const strings = new Map<string, number[]>();
  for (const { stringName, position } of units)
    strings.set(stringName, [...(strings.get(stringName) ?? []), ...(position === null ? [] : [position])]);
  const names = [...strings].map(([name, at]) => {
    if (at.length === 0 || at.length > NAMED_MAX) return name;
    return noticePlaces.stringAt(
      name,
      [...at].sort((a, b) => a - b),
    );
  });
  return names.length > NAMED_MAX ? noticePlaces.manyStrings(names.length) : noticePlaces.strings(names);
}

/** What to treat as live while something does not shut down. */
export function liveWords(units: CauseWords['units']): string {
  // one unit that passes makes its whole string live
  const where = stringsInWords(units.map(({ stringName }) => ({ stringName, position: null })));
  return where ? noticePlaces.live(where) : noticePlaces.liveAll;
}

/** @param cause what else is known of the cause, where the event is one's */
export function noticeWords(told: Told, event: NoticeEvent, cause: CauseWords | null): NoticeWords {
  const { detail, kind } = event;
  const line = eventWords(kind, detail).words;
  switch (kind) {
    case 'cause_opened':
    case 'cause_reopened':
    case 'cause_changed':
    case 'cause_closed': {
      const headline = text(detail.headline) || line;
      const hazard = told.kind === 'hazard';
      if (told.phase === 'goes')
        return {
          headline: noticeSaid.over(headline),
          body: hazard ? noticeSaid.stayedAwayNoProof : noticeSaid.stayedAway,
        };
      const back = kind === 'cause_reopened' ? noticeSaid.again(headline) : headline;
      if (hazard) return { headline: back, body: liveWords(cause?.units ?? []) };
      const evidence = cause?.evidence ?? '';
      return {
        headline: back,
        body: told.kind === 'silence' ? `${evidence} ${noticeSaid.cantBeConfirmed}`.trim() : evidence,
      };
    }
    case 'logger_lost':
      return {
        headline: noticeSaid.loggerGone(text(detail.logger)),
        body: noticeSaid.loggerGoneMeans,
      };
    case 'case_mentioned':
      return { headline: line, body: text(detail.body).slice(0, 500) };
    case 'case_reopened':
      if (told.kind === 'own_report')
        return { headline: noticeSaid.takenUpAgain(text(detail.title)), body: '' };
      return { headline: line, body: text(detail.reason).slice(0, 500) };
    case 'case_assigned':
    case 'case_closed':
    case 'case_opened':
      return { headline: told.kind === 'own_report' ? ownReport(event) : line, body: '' };
    case 'hazard_acknowledged':
      return { headline: line, body: noticeSaid.hazardStands };
    case 'handover_made':
      return { headline: line, body: noticeSaid.papersAreWithTheSite };
    default:
      return { headline: line, body: '' };
  }
}

function ownReport({ kind, detail }: NoticeEvent): string {
  const title = text(detail.title);
  if (kind === 'case_assigned') return noticeSaid.somebodyLooks(title);
  return detail.state === 'no_fault_found' ? noticeSaid.noFaultFound(title) : noticeSaid.done(title);
}
