import type { ReactNode } from 'react';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import {
  RULE_SETS,
  SENSOR_KINDS,
  STRUCTURES,
  type PartKind,
} from '../../domain/commissioning/as-built/parts';
import { PART_WORDS } from '../../words/domain-as-built-parts';
import { celsius, power } from '../../drawings/numbers';
import type { AsBuilt } from '../../schemas/api/as-built';
import { nameOf } from '../../schemas/as-built-values';
import { paths } from '../../schemas/paths';
import type { Editing } from './PartDialog';
import { partsSheets } from '../../words/as-built';

interface Props {
  built: AsBuilt;
  mayWrite: boolean;
  onEdit: (editing: Editing) => void;
  onToken: (logger: { id: string; serial: string; hasToken: boolean }) => void;
}

const choice = (options: readonly { value: string; label: string }[], value: string): string =>
  options.find((o) => o.value === value)?.label ?? value;

/** One kind of part as a list: what each is, and a form behind it. */
function Parts<T extends { id: string }>({
  kind,
  title,
  rows,
  name,
  detail,
  extra,
  link,
  blocked,
  mayWrite,
  onEdit,
}: {
  kind: PartKind;
  title: string;
  rows: readonly T[];
  name: (row: T) => string;
  detail: (row: T) => ReactNode;
  extra?: (row: T) => ReactNode;
  /** A page that says more of them. */
  link?: { words: string; href: string };
  /** Why none can be added yet. */
  blocked?: string | null;
} & Pick<Props, 'mayWrite' | 'onEdit'>) {
  const words = PART_WORDS[kind];
  return (
    <Sheet
      id={`parts-${kind}`}
      title={title}
      level={3}
      aside={
        link && (
          <a className="-my-[13px] inline-block py-[13px] text-petrol hover:underline" href={link.href}>
            {link.words}
          </a>
        )
      }
    >
      {rows.length === 0 ? (
        <p className="text-ink-2">{blocked ?? partsSheets.noYet(words.many)}</p>
      ) : (
        <ul>
          {rows.map((row) => (
            <li
              key={row.id}
              className="flex flex-wrap items-center justify-between gap-x-3 border-b border-rule-faint py-1.5 last:border-b-0"
            >
              <div className="min-w-0 flex-1 py-1">
                <span className="font-medium">{name(row)}</span>
                <span className="block text-sm text-ink-2">{detail(row)}</span>
                {extra?.(row)}
              </div>
              {mayWrite && (
                <button
                  type="button"
                  className="target px-2 text-petrol hover:underline"
                  aria-label={partsSheets.editOneRow(words.one, name(row))}
                  onClick={() => onEdit({ kind, id: row.id })}
                >
                  {partsSheets.edit}
                </button>
              )}
            </li>
          ))}
        </ul>
      )}
      {mayWrite && !blocked && (
        <Button className="mt-3" onClick={() => onEdit({ kind, id: null })}>
          {partsSheets.addA(words.a)}
        </Button>
      )}
    </Sheet>
  );
}

const stringsOn = (built: AsBuilt, test: (s: AsBuilt['strings'][number]) => boolean): string =>
  partsSheets.countedTestString(built.strings.filter(test).length);
const degrees = (value: number): string => `${String(value).replace('-', '−')}°`;

/** What strings name: planes, inverters, loggers, transmitters. */
export function PartsSheets({ built, mayWrite, onEdit, onToken }: Props) {
  const common = { mayWrite, onEdit };
  const { site } = built;
  return (
    <>
      <Parts
        {...common}
        kind="plane"
        title={partsSheets.planes}
        rows={built.planes}
        name={(p) => p.name}
        detail={(p) =>
          partsSheets.tiltAzimuth(
            degrees(p.surfaceTilt),
            degrees(p.surfaceAzimuth),
            stringsOn(built, (s) => s.plane === p.id),
          )
        }
      />
      <Parts
        {...common}
        kind="inverter"
        title={partsSheets.inverters}
        rows={built.inverters}
        name={(v) => v.name}
        detail={(v) =>
          `${v.inverterType === null ? partsSheets.typeNotInThe : nameOf(built, 'inverter_type', v.inverterType)}; ${power(v.acPowerMax)}, ${partsSheets.countedInputsInput(v.inputs.length)}; ${stringsOn(built, (s) => v.inputs.some((i) => i.id === s.input))}`
        }
      />
      <Parts
        {...common}
        kind="logger"
        title={partsSheets.loggers}
        link={{ words: partsSheets.tokensAndWhatWas, href: paths.loggers(site.id) }}
        rows={built.loggers}
        name={(l) => l.serial}
        detail={(l) => (
          <>
            {l.lastSpokeAt ? (
              <>
                {partsSheets.lastSpoke}
                <SiteTime at={l.lastSpokeAt} now={built.at} timeZone={site.timeZone} zone />
              </>
            ) : (
              partsSheets.hasNotSpokenYet
            )}
            ; {l.tokenAt === null ? partsSheets.noToken : partsSheets.hasAToken}
          </>
        )}
        extra={(l) =>
          mayWrite && (
            <button
              type="button"
              className="target text-petrol hover:underline"
              onClick={() => onToken({ id: l.id, serial: l.serial, hasToken: l.tokenAt !== null })}
            >
              {l.tokenAt === null ? partsSheets.makeAToken : partsSheets.makeANewToken}
            </button>
          )
        }
      />
      <Parts
        {...common}
        kind="transmitter"
        title={partsSheets.transmitters}
        rows={built.transmitters}
        name={(t) => t.name}
        detail={(t) =>
          partsSheets.zoneBuiltStrings0(
            nameOf(built, 'zone', t.zone),
            t.strings.length,
            t.strings.map((s) => nameOf(built, 'string', s)).join(', '),
          )
        }
        blocked={built.zones.length === 0 ? partsSheets.transmitterNeedsZone : null}
      />
    </>
  );
}

/** What shuts the site down, what senses, and the site's own facts. */
export function SiteSheets({ built, mayWrite, onEdit }: Omit<Props, 'onToken'>) {
  const common = { mayWrite, onEdit };
  const { site } = built;
  return (
    <>
      <Parts
        {...common}
        kind="initiator"
        title={partsSheets.initiators}
        rows={built.initiators}
        name={(i) => i.name}
        detail={(i) => i.place || partsSheets.placeNotEntered}
      />
      <Parts
        {...common}
        kind="zone"
        title={partsSheets.zones}
        rows={built.zones}
        name={(z) => z.name}
        detail={(z) =>
          `${nameOf(built, 'initiator', z.initiator) ?? ''}; ${stringsOn(built, (s) => s.zone === z.id)}`
        }
        blocked={built.initiators.length === 0 ? partsSheets.zoneNeedsInitiator : null}
      />
      <Parts
        {...common}
        kind="sensor"
        title={partsSheets.sensors}
        rows={built.sensors}
        name={(s) => choice(SENSOR_KINDS, s.kind)}
        detail={(s) =>
          partsSheets.numberAtLogger(
            s.number,
            nameOf(built, 'logger', s.logger),
            s.plane === null ? undefined : (nameOf(built, 'plane', s.plane) ?? ''),
          )
        }
        blocked={built.loggers.length === 0 ? partsSheets.sensorNeedsLogger : null}
      />
      <Sheet id="parts-site" title={partsSheets.site} level={3}>
        <dl className="grid gap-2">
          <Fact name={partsSheets.place}>
            {site.place || partsSheets.notEntered}; {degrees(site.latitude)}, {degrees(site.longitude)}
          </Fact>
          <Fact name={partsSheets.timeZone}>{site.timeZone.replaceAll('_', ' ')}</Fact>
          <Fact name={partsSheets.rules}>
            {choice(RULE_SETS, site.ruleSet)}; {choice(STRUCTURES, site.structure).toLowerCase()}
          </Fact>
          <Fact name={partsSheets.airColdestHottest}>
            {site.temperatureMin === null ? partsSheets.notEntered : celsius(site.temperatureMin)},{' '}
            {site.temperatureMax === null ? partsSheets.notEntered : celsius(site.temperatureMax)}
          </Fact>
          <Fact name={partsSheets.shutdownSwitch}>
            {site.shutdownSwitchPlace || partsSheets.placeNotEntered}
          </Fact>
          <Fact name={partsSheets.contact}>
            {[site.contactName, site.contactPhone].filter((c) => c !== '').join(', ') ||
              partsSheets.notEntered}
          </Fact>
        </dl>
        {mayWrite && (
          <Button className="mt-3" onClick={() => onEdit({ kind: 'site', id: site.id })}>
            {partsSheets.editTheSite}
          </Button>
        )}
      </Sheet>
    </>
  );
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div>
      <dt className="text-sm text-ink-2">{name}</dt>
      <dd>{children}</dd>
    </div>
  );
}
