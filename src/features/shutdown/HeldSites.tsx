import { Table, type Column } from '../../components/ui/Table';
import { MixBar } from '../../drawings/MixBar';
import { siteClock, useReaderZone } from '../../components/ui/reader-zone';
import { fullTime } from '../../drawings/times';
import type { CommandNow } from '../../schemas/api/now';
import { paths } from '../../schemas/paths';
import type { Held } from './groups';
import { heldSites } from '../../words/shutdown';

const IN_FORCE: Record<CommandNow['inForce'], string> = {
  initiator: heldSites.initiatorOpen,
  keep_alive_lost: heldSites.keepAliveGone,
  power_lost: heldSites.powerGone,
  released: heldSites.released,
};

/** Confirmed: a unit that says it is in shutdown and is not stuck there against a release. */
const confirmed = ({ site: { counts } }: Held): number => Math.max(0, counts.shutdown - counts.stuck);

/** Sites with something other than a release in force: where, since when, by whom, and how many units say so. */
export function HeldSites({ caption, held, now }: { caption: string; held: readonly Held[]; now: string }) {
  const readerZone = useReaderZone();
  const columns: Column<Held>[] = [
    {
      key: 'site',
      label: heldSites.site,
      cell: ({ site }) => (
        <>
          <a
            href={paths.site(site.id)}
            className="target inline-flex items-center font-semibold hover:underline"
          >
            {site.name}
          </a>
          <a
            href={paths.shutdownTests(site.id)}
            className="target flex items-center text-sm text-petrol hover:underline"
          >
            {heldSites.shutdownTests}
            <span className="sr-only">{heldSites.ofSite(site.name)}</span>
          </a>
        </>
      ),
    },
    {
      key: 'commands',
      label: heldSites.inForce,
      cell: ({ site, commands }) => (
        <ul className="space-y-1">
          {commands.map((c) => (
            <li key={`${c.whereKind} ${c.where}`}>
              {heldSites.whereInForceSince(c.where, IN_FORCE[c.inForce])}
              <time dateTime={c.since} title={fullTime(c.since, site.timeZone)}>
                {siteClock(c.since, now, site.timeZone, readerZone)}
              </time>
              {c.by && <span className="text-ink-2">, {c.by}</span>}
            </li>
          ))}
        </ul>
      ),
    },
    {
      key: 'units',
      label: heldSites.units,
      from: 'sm',
      cell: ({ site }) => (
        <MixBar id={`held-${site.id}-${caption.length}`} counts={site.counts} width={150} />
      ),
    },
    {
      key: 'confirmed',
      label: heldSites.sayTheyAreIn,
      numeric: true,
      cell: (line) => heldSites.lineOfUnits(confirmed(line), line.site.counts.units),
    },
  ];
  return <Table caption={caption} columns={columns} rows={held} rowKey={({ site }) => site.id} />;
}
