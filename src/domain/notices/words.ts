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
const listed = (items: readonly string[]): string =>
  items.length < 2 ? (items[0] ?? '') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;

const NAMED_MAX = 6;

/** "B3 (positions 4 and 9) and B4": strings with the positions that are known. */
export function stringsInWords(units: CauseWords['units']): string {
  const strings = new Map<string, number[]>();
  for (const { stringName, position } of units)
    strings.set(stringName, [...(strings.get(stringName) ?? []), ...(position === null ? [] : [position])]);
  const names = [...strings].map(([name, at]) => {
    if (at.length === 0 || at.length > NAMED_MAX) return name;
    const sorted = [...at].sort((a, b) => a - b).map(String);
    return `${name} (position${at.length === 1 ? '' : 's'} ${listed(sorted)})`;
  });
  return names.length > NAMED_MAX ? `${names.length} strings` : listed(names);
}

/** What to treat as live while something does not shut down. */
export function liveWords(units: CauseWords['units']): string {
  // one unit that passes makes its whole string live
  const where = stringsInWords(units.map(({ stringName }) => ({ stringName, position: null })));
  return `Treat as live: ${where ? `all of ${where}, with the home run and everything up to the inverter` : 'every string of the site'}.`;
}

const OVER = 'It has stayed away for half an hour.';
const UNCONFIRMED = 'While it is silent, a shutdown of its units can’t be confirmed: treat them as live.';

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
          headline: `Over: ${headline}`,
          body: hazard
            ? `${OVER} That is no proof: isolate, lock out and prove dead before any work, as ever.`
            : OVER,
        };
      const back = kind === 'cause_reopened' ? `Again: ${headline}` : headline;
      if (hazard) return { headline: back, body: liveWords(cause?.units ?? []) };
      return { headline: back, body: cause?.evidence ?? '' };
    }
    case 'gateway_silent':
      return { headline: line, body: UNCONFIRMED };
    case 'logger_lost':
      return {
        headline: `The logger ${text(detail.logger)} has not reported for an hour`.replace('  ', ' '),
        body: 'Nothing of its strings is seen, a hazard neither: treat them as live. It keeps its readings and sends them later.',
      };
    case 'case_mentioned':
      return { headline: line, body: text(detail.body).slice(0, 500) };
    case 'case_reopened':
      if (told.kind === 'own_report') return { headline: `Taken up again: ${text(detail.title)}`, body: '' };
      return { headline: line, body: text(detail.reason).slice(0, 500) };
    case 'case_assigned':
    case 'case_closed':
    case 'case_opened':
      return { headline: told.kind === 'own_report' ? ownReport(event) : line, body: '' };
    case 'hazard_acknowledged':
      return { headline: line, body: 'It stands until the readings say otherwise.' };
    case 'handover_made':
      return { headline: line, body: 'The papers are with the site.' };
    default:
      return { headline: line, body: '' };
  }
}

function ownReport({ kind, detail }: NoticeEvent): string {
  const title = text(detail.title);
  if (kind === 'case_assigned') return `Somebody is looking into your report: ${title}`;
  return detail.state === 'no_fault_found'
    ? `Looked into, no fault found: ${title}`
    : `Looked into and done: ${title}`;
}
