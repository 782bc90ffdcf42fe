import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { eventWords, type EventTone } from '../../domain/verdicts/event-words';
import type { StringPage } from '../../schemas/api/string';
import { eventsSheet } from '../../words/strings';

const MARK: Record<EventTone, { shape: string; colour: string }> = {
  crimson: { shape: '◆', colour: 'text-crimson' },
  rust: { shape: '▼', colour: 'text-rust' },
  plum: { shape: '▂', colour: 'text-plum' },
  slate: { shape: '▨', colour: 'text-slate' },
  petrol: { shape: '▮', colour: 'text-petrol' },
};
const SHOWN = 8;

/** What has happened to the string in two weeks, newest first. */
export function EventsSheet({ page }: { page: StringPage }) {
  const { events, site } = page;
  return (
    <Sheet id="events" title={eventsSheet.whatHappened} aside={eventsSheet.n14Days}>
      {events.length === 0 ? (
        <p className="text-ink-2">{eventsSheet.nothingOutOfThe}</p>
      ) : (
        <ul className="space-y-2">
          {events.slice(0, SHOWN).map((event) => {
            const { words, tone } = eventWords(event.kind, event.detail);
            return (
              <li key={event.id} className="grid grid-cols-[16px_1fr_auto] gap-2">
                <span aria-hidden="true" className={MARK[tone].colour}>
                  {MARK[tone].shape}
                </span>
                <span>{words}</span>
                <span className="whitespace-nowrap text-sm text-ink-2">
                  <SiteTime at={event.at} now={page.at} timeZone={site.timeZone} />
                </span>
              </li>
            );
          })}
        </ul>
      )}
    </Sheet>
  );
}
