import { TraceSheet } from '../../components/trace/TraceSheet';
import type { CaseItem } from '../../schemas/api/cases';
import type { EventsPage, SitePage } from '../../schemas/api/site';
import { CasesSheet } from './CasesSheet';
import { EventsSheet } from './EventsSheet';
import { InvertersSheet } from './InvertersSheet';
import type { KindWanted } from './query';
import { RadioSheet } from './RadioSheet';
import { StringsSheet } from './StringsSheet';
import { ZonesSheet } from './ZonesSheet';

interface Props {
  page: SitePage;
  events: EventsPage;
  cases: readonly CaseItem[];
  kind: KindWanted;
  onKind: (kind: KindWanted) => void;
  now: string;
  zone: boolean;
}

/** What a site's page says below how it stands: one piece, which comes after the rest. */
export function FurtherSheets({ page, events, cases, kind, onKind, now, zone }: Props) {
  const { id, timeZone } = page.site;
  return (
    <>
      <CasesSheet site={id} initial={cases} />
      <ZonesSheet zones={page.zones} now={now} timeZone={timeZone} zone={zone} />
      <StringsSheet site={id} strings={page.strings} />
      <TraceSheet siteId={id} timeZone={timeZone} />
      <InvertersSheet inverters={page.inverters} now={now} timeZone={timeZone} zone={zone} />
      <div className="grid items-start gap-6 xl:grid-cols-2">
        <EventsSheet
          site={id}
          initial={events}
          now={now}
          timeZone={timeZone}
          zone={zone}
          kind={kind}
          onKind={onKind}
        />
        <RadioSheet
          siteId={id}
          gateways={page.gateways}
          loggers={page.loggers}
          now={now}
          timeZone={timeZone}
          zone={zone}
        />
      </div>
    </>
  );
}
