import { useState } from 'react';
import type { SlotRef } from '../../components/placements/evidence';
import { suggestedFor } from '../../components/placements/suggestions';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { decibelMilliwatts } from '../../drawings/numbers';
import { clockOrDate, fullTime } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import type { RollCallPage } from '../../schemas/api/roll-call';
import type { GatewayTally, RollTally, RollUnit, UnknownUnit } from './tally';
import { nearWords } from './words';
import { lists } from '../../words/commissioning';

const SHOWN_AT_FIRST = 30;

/** Who has not answered, and where on the roof to look. */
export function MissingSheet({
  tally,
  started,
  told,
  siteId,
  onReplace,
}: {
  tally: RollTally;
  started: boolean;
  /** Whether it can be told of each unit that it does not answer: else nobody is sent to them. */
  told: boolean;
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
      label: lists.string,
      cell: (u) => (
        <a className="font-semibold hover:underline" href={paths.string(siteId, u.stringId)}>
          {u.stringName}
        </a>
      ),
    },
    { key: 'position', label: lists.position, numeric: true, cell: (u) => u.position },
    { key: 'serial', label: lists.serial, className: 'whitespace-nowrap', cell: (u) => u.serial },
    {
      key: 'place',
      label: lists.placeOnTheRoof,
      className: 'w-full text-ink-2',
      cell: (u) => u.roofPlace || lists.notRecorded,
    },
  ];
  if (onReplace)
    columns.push({
      key: 'replace',
      label: lists.anotherUnit,
      from: 'sm', // on a phone "Replace a unit" below does it
      cell: (u) => (
        <Button
          className="!px-2.5 !text-sm"
          aria-label={lists.replaceAt(u.serial, u.stringName, u.position)}
          onClick={() => onReplace({ stringId: u.stringId, position: u.position })}
        >
          {lists.replace}
        </Button>
      ),
    });
  return (
    <Sheet
      id="missing"
      title={lists.stillToHear}
      flush
      aside={
        <span className="flex flex-wrap items-center gap-x-4 gap-y-1">
          {lists.countedMissingUnit(tally.missing.length)}
          {told && tally.missing.length > 0 && (
            <ButtonLink href={paths.walk(siteId)}>{lists.walkToThem}</ButtonLink>
          )}
        </span>
      }
    >
      <Table
        caption={lists.unitsThatHaveNot}
        columns={columns}
        rows={shown}
        rowKey={(u) => u.serial}
        empty={<Notice kind="done" title={lists.everyUnitOnThe} />}
      />
      {shown.length < tally.missing.length && (
        <Button className="mt-3" onClick={() => setAll(true)}>
          {lists.showAll(tally.missing.length)}
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
    <Sheet id="unknown" title={lists.heardButNotOn}>
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
                  {u.answer.signal !== null && `, ${decibelMilliwatts(u.answer.signal)}`}
                  {lists.firstAt}
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
                <Button aria-label={lists.placeSerial(u.answer.serial)} onClick={() => onPlace(u)}>
                  {lists.place}
                </Button>
              )}
            </li>
          );
        })}
      </ul>
      <p className="mt-3 text-sm text-ink-2">{lists.aSpareANeighbours}</p>
    </Sheet>
  );
}

/** The roll by gateway, and the weakest signal of all. */
export function GatewaysSheet({ page, tally }: { page: RollCallPage; tally: RollTally }) {
  if (tally.gateways.length === 0) return null;
  const columns: Column<GatewayTally>[] = [
    {
      key: 'name',
      label: lists.gateway,
      cell: (g) => (
        <>
          <span className="font-medium">{g.name}</span>
          <span className="block text-sm text-ink-2">
            {g.lastHeardAt
              ? lists.silentLastHeardAt(g.silent, g.lastHeardAt, page.at, page.site.timeZone)
              : lists.nothingHeardYet}
          </span>
        </>
      ),
    },
    { key: 'heard', label: lists.heard, numeric: true, cell: (g) => g.heard },
    {
      key: 'weakest',
      label: lists.weakest,
      numeric: true,
      cell: (g) => (g.weakest ? decibelMilliwatts(g.weakest.signal) : 'none'),
    },
  ];
  const w = tally.weakest;
  return (
    <Sheet id="gateways" title={lists.gateways}>
      <Table
        caption={lists.rollCallByGateway}
        columns={columns}
        rows={tally.gateways}
        rowKey={(g) => g.name}
      />
      {w && (
        <p className="mt-3 text-sm text-ink-2">
          {lists.weakestOfAllPosition(w.stringName, w.position, w.serial, w.signal)}
          {w.answer && lists.byGateway(w.answer.gateway)}.
        </p>
      )}
    </Sheet>
  );
}
