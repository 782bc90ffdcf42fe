import { useState } from 'react';
import type { SlotRef } from '../../components/placements/evidence';
import { suggestedFor } from '../../components/placements/suggestions';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { counted, decibelMilliwatts } from '../../drawings/numbers';
import { clockOrDate, fullTime } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import type { RollCallPage } from '../../schemas/api/roll-call';
import type { GatewayTally, RollTally, RollUnit, UnknownUnit } from './tally';
import { nearWords } from './words';

const SHOWN_AT_FIRST = 30;

/** Who has not answered, and where on the roof to look. */
export function MissingSheet({
  tally,
  started,
  siteId,
  onReplace,
}: {
  tally: RollTally;
  started: boolean;
  siteId: string;
  /** Another unit takes the place of one that isn't heard; null: the person may not change the as-built. */
  onReplace: ((slot: SlotRef) => void) | null;
}) {
  const [all, setAll] = useState(false);
  if (tally.roster === 0 || (!started && tally.heard === 0)) return null;
  const shown = all ? tally.missing : tally.missing.slice(0, SHOWN_AT_FIRST);
  const columns: Column<RollUnit>[] = [
    {
      key: 'string',
      label: 'String',
      cell: (u) => (
        <a className="font-semibold hover:underline" href={paths.string(siteId, u.stringId)}>
          {u.stringName}
        </a>
      ),
    },
    { key: 'position', label: 'Position', numeric: true, cell: (u) => u.position },
    { key: 'serial', label: 'Serial', className: 'whitespace-nowrap', cell: (u) => u.serial },
    {
      key: 'place',
      label: 'Place on the roof',
      className: 'w-full text-ink-2',
      cell: (u) => u.roofPlace || 'not recorded',
    },
  ];
  if (onReplace)
    columns.push({
      key: 'replace',
      label: 'Another unit',
      from: 'sm', // on a phone "Replace a unit" below does it
      cell: (u) => (
        <Button
          className="!px-2.5 !text-sm"
          aria-label={`Replace ${u.serial} at ${u.stringName}-${u.position}`}
          onClick={() => onReplace({ stringId: u.stringId, position: u.position })}
        >
          Replace
        </Button>
      ),
    });
  return (
    <Sheet
      id="missing"
      title="Still to hear"
      flush
      aside={
        <span className="flex flex-wrap items-center gap-x-4 gap-y-1">
          {counted(tally.missing.length, 'unit')}
          {tally.missing.length > 0 && <ButtonLink href={paths.walk(siteId)}>Walk to them</ButtonLink>}
        </span>
      }
    >
      <Table
        caption="Units that have not answered"
        columns={columns}
        rows={shown}
        rowKey={(u) => u.serial}
        empty={<Notice kind="done" title="Every unit on the roll has answered" />}
      />
      {shown.length < tally.missing.length && (
        <Button className="mt-3" onClick={() => setAll(true)}>
          Show all {tally.missing.length}
        </Button>
      )}
    </Sheet>
  );
}

/** Serials that answered and stand on no as-built of the site. */
export function UnknownSheet({
  page,
  tally,
  onPlace,
}: {
  page: RollCallPage;
  tally: RollTally;
  onPlace: ((stranger: UnknownUnit) => void) | null;
}) {
  if (tally.unknown.length === 0) return null;
  return (
    <Sheet id="unknown" title="Heard, but not on the as-built">
      <ul>
        {tally.unknown.map((u) => {
          const [best] = suggestedFor(u.answer, page.strings, page.answers);
          const sure = best?.reasons.find((r) => r.kind === 'misread' || r.kind === 'serial_run');
          return (
            <li
              key={u.answer.serial}
              className="flex items-start justify-between gap-3 border-b border-rule-faint py-2.5 first:pt-0 last:border-b-0 last:pb-0"
            >
              <div className="min-w-0">
                <p className="font-semibold">{u.answer.serial}</p>
                <p className="text-sm text-ink-2">
                  {nearWords(u)}
                  {u.answer.signal !== null && `, ${decibelMilliwatts(u.answer.signal)}`}, first at{' '}
                  <time dateTime={u.answer.at} title={fullTime(u.answer.at, page.site.timeZone)}>
                    {clockOrDate(u.answer.at, page.at, page.site.timeZone)}
                  </time>
                </p>
                {best && sure && (
                  <p className="text-sm text-ink-2">
                    {best.stringName}: {sure.words}
                  </p>
                )}
              </div>
              {onPlace && (
                <Button aria-label={`Place ${u.answer.serial}`} onClick={() => onPlace(u)}>
                  Place
                </Button>
              )}
            </li>
          );
        })}
      </ul>
      <p className="mt-3 text-sm text-ink-2">
        A spare, a neighbour’s unit, or one that sits where the drawing has another: read the label on the
        roof.
      </p>
    </Sheet>
  );
}

/** The roll by gateway, and the weakest signal of all. */
export function GatewaysSheet({ page, tally }: { page: RollCallPage; tally: RollTally }) {
  if (tally.gateways.length === 0) return null;
  const columns: Column<GatewayTally>[] = [
    {
      key: 'name',
      label: 'Gateway',
      cell: (g) => (
        <>
          <span className="font-medium">{g.name}</span>
          <span className="block text-sm text-ink-2">
            {g.lastHeardAt
              ? `${g.silent ? 'silent, last' : 'last'} ${clockOrDate(g.lastHeardAt, page.at, page.site.timeZone)}`
              : 'nothing heard yet'}
          </span>
        </>
      ),
    },
    { key: 'heard', label: 'Heard', numeric: true, cell: (g) => g.heard },
    {
      key: 'weakest',
      label: 'Weakest',
      numeric: true,
      cell: (g) => (g.weakest ? decibelMilliwatts(g.weakest.signal) : 'none'),
    },
  ];
  const w = tally.weakest;
  return (
    <Sheet id="gateways" title="Gateways">
      <Table caption="Roll call by gateway" columns={columns} rows={tally.gateways} rowKey={(g) => g.name} />
      {w && (
        <p className="mt-3 text-sm text-ink-2">
          Weakest of all: {w.stringName}, position {w.position} ({w.serial}) at {decibelMilliwatts(w.signal)}
          {w.answer && `, by ${w.answer.gateway}`}.
        </p>
      )}
    </Sheet>
  );
}
