import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { counted } from '../../drawings/numbers';
import type { CommandNow } from '../../schemas/api/now';
import type { ZoneNow } from '../../schemas/api/site';

const WORDS: Record<CommandNow['inForce'], { word: string; tone: 'plum' | 'petrol' | 'rust' }> = {
  initiator: { word: 'In shutdown, initiator open', tone: 'plum' },
  keep_alive_lost: { word: 'In shutdown, keep-alive gone', tone: 'rust' },
  power_lost: { word: 'In shutdown, power gone', tone: 'rust' },
  released: { word: 'Released', tone: 'petrol' },
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
export function ZonesSheet({
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
  const columns: Column<ZoneNow>[] = [
    {
      key: 'zone',
      label: 'Zone',
      cell: (zone) => (
        <>
          <span className="font-semibold">{zone.name}</span>
          <span className="block text-sm text-ink-2">{counted(zone.strings.length, 'string')}</span>
        </>
      ),
    },
    {
      key: 'force',
      label: 'In force',
      cell: (zone) => (
        <div className="space-y-1">
          {zone.command ? <InForce inForce={zone.command.inForce} /> : <span>not reported yet</span>}
          {zone.transmitters.map((t) => (
            <p key={t.where} className="text-sm">
              Transmitter {t.where}: {WORDS[t.inForce].word.toLowerCase()} since{' '}
              <SiteTime at={t.since} now={now} timeZone={timeZone} zone={named} />
            </p>
          ))}
        </div>
      ),
    },
    {
      key: 'since',
      label: 'Since, by',
      cell: (zone) =>
        zone.command ? (
          <>
            <SiteTime at={zone.command.since} now={now} timeZone={timeZone} zone={named} />
            {zone.command.by && <span className="block text-sm text-ink-2">{zone.command.by}</span>}
          </>
        ) : (
          '–'
        ),
    },
    {
      key: 'initiator',
      label: 'Initiator',
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
    <Sheet
      id="zones"
      flush
      title="What is commanded"
      aside="as the logger reports it; Wakeline switches nothing"
    >
      <Table
        caption="Zones and the command in force in each"
        columns={columns}
        rows={zones}
        rowKey={(zone) => zone.name}
        empty={<Notice kind="empty" title="No zone is entered for this site" />}
      />
    </Sheet>
  );
}
