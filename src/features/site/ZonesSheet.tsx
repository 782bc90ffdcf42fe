import { memo } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import type { CommandNow } from '../../schemas/api/now';
import type { ZoneNow } from '../../schemas/api/site';
import { zonesSheet } from '../../words/site';

const WORDS: Record<CommandNow['inForce'], { word: string; tone: 'plum' | 'petrol' | 'rust' }> = {
  initiator: { word: zonesSheet.inShutdownInitiatorOpen, tone: 'plum' },
  keep_alive_lost: { word: zonesSheet.inShutdownKeepAlive, tone: 'rust' },
  power_lost: { word: zonesSheet.inShutdownPowerGone, tone: 'rust' },
  released: { word: zonesSheet.released, tone: 'petrol' },
};

function InForce({ inForce }: Pick<CommandNow, 'inForce'>) {
  const { word, tone } = WORDS[inForce];
  return (
    <Tag tone={tone} shape={inForce === 'released' ? '▮' : '▂'}>
      {word}
    </Tag>
  );
}

/** What is commanded in which zone, since when and by whom, as the logger reported it. */
export const ZonesSheet = memo(function ZonesSheet({
  zones,
  now,
  timeZone,
  zone: named,
}: {
  zones: readonly ZoneNow[];
  now: string;
  timeZone: string;
  zone: boolean;
}) {
  const sinceBy = ({ command }: ZoneNow) =>
    command && (
      <>
        <SiteTime at={command.since} now={now} timeZone={timeZone} zone={named} />
        {command.by && <span className="block text-sm text-ink-2">{command.by}</span>}
      </>
    );
  const columns: Column<ZoneNow>[] = [
    {
      key: 'zone',
      label: zonesSheet.zone,
      cell: (zone) => (
        <>
          <span className="font-semibold">{zone.name}</span>
          <span className="block text-sm text-ink-2">
            {zonesSheet.countedStringsString(zone.strings.length)}
          </span>
        </>
      ),
    },
    {
      key: 'force',
      label: zonesSheet.inForce,
      cell: (zone) => (
        <div className="space-y-1">
          {zone.command ? (
            <InForce inForce={zone.command.inForce} />
          ) : (
            <span>{zonesSheet.notReportedYet}</span>
          )}
          {zone.command && (
            <div className="text-sm sm:hidden">
              {zonesSheet.since}
              {sinceBy(zone)}
            </div>
          )}
          {zone.transmitters.map((t) => (
            <p key={t.where} className="text-sm">
              {zonesSheet.transmitterSince(t.where, WORDS[t.inForce].word)}
              <SiteTime at={t.since} now={now} timeZone={timeZone} zone={named} />
            </p>
          ))}
        </div>
      ),
    },
    {
      key: 'since',
      label: zonesSheet.sinceBy,
      from: 'sm',
      cell: (zone) => sinceBy(zone) ?? '–',
    },
    {
      key: 'initiator',
      label: zonesSheet.initiator,
      from: 'sm',
      cell: (zone) => (
        <>
          {zone.initiator}
          {zone.initiatorPlace && <span className="block text-sm text-ink-2">{zone.initiatorPlace}</span>}
        </>
      ),
    },
  ];
  return (
    <Sheet id="zones" flush title={zonesSheet.whatIsCommanded} aside={zonesSheet.asTheLoggerReports}>
      <Table
        caption={zonesSheet.zonesAndTheCommand}
        columns={columns}
        rows={zones}
        rowKey={(zone) => zone.name}
        empty={<Notice kind="empty" title={zonesSheet.noZoneIsEntered} />}
      />
    </Sheet>
  );
});
