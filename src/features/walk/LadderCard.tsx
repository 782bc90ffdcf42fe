import { Caution } from '../../components/ui/Caution';
import { Button, ButtonLink } from '../../components/ui/Button';
import { listed, number } from '../../drawings/numbers';
import { clock, longDate, zoneName } from '../../drawings/times';
import { withQuery } from '../../lib/api';
import type { WalkPage, WalkView } from '../../schemas/api/walk';
import { paths } from '../../schemas/paths';
import { chosenStops, readingsOf, sparesOf, stopsOfPage } from './stops';
import { STOP_WORDS, walkHeading } from '../../words/walk-sentences';
import { ladderCard } from '../../words/walk';

/** Stops and strings that a card of one screen carries; more need two trips. */
const STOPS_MAX = 6;
const STRINGS_MAX = 4;

const voltsFrom = (v: number): string => (v < 20 ? number(v, 1) : number(v));
const joint = (halves: readonly [string | null, string | null]): string =>
  halves[0] && halves[1]
    ? halves[0] === halves[1]
      ? `2 × ${halves[0]}`
      : `${halves[0]} + ${halves[1]}`
    : ladderCard.typesNotEnteredRead;

/** One screen for the pocket: where, what to bring, what the meter should read, what to beware of. */
export function LadderCard({ page, view }: { page: WalkPage; view: WalkView }) {
  const stops = chosenStops(stopsOfPage(page), view);
  const spares = sparesOf(page, stops);
  const readings = readingsOf(page, stops);
  const { site } = page;
  const back = withQuery(paths.walk(site.id), { stops: view.stops, string: view.string });
  const shown = stops.slice(0, STOPS_MAX);
  return (
    <article className="mx-auto max-w-[520px] px-4 py-2.5 text-[13px] leading-[17px]">
      <header className="flex items-baseline justify-between gap-3">
        <h1 className="text-[19px] leading-6">{walkHeading(page, stops)}</h1>
        <p className="flex-none text-right text-xs text-ink-2">
          {clock(page.at, site.timeZone)} {zoneName(page.at, site.timeZone)},{' '}
          {longDate(page.at, site.timeZone)}
        </p>
      </header>
      <p className="text-ink-2">
        {site.name}
        {site.place && `, ${site.place}`}
      </p>
      <div className="my-2 [&_aside]:!px-3 [&_aside]:!py-2 [&_aside]:!text-[13px] [&_aside]:!leading-[17px]">
        <Caution strong={ladderCard.shutdownIsNotIsolation}>{ladderCard.modulesAndTheirLeads}</Caution>
      </div>
      <section className="border-t-2 border-ink pt-1.5">
        <h2 className="mb-0.5 text-[13px]">{ladderCard.where}</h2>
        <ol>
          {shown.map((s, i) => (
            <li key={s.key} className="flex justify-between gap-3 border-b border-rule-faint py-1">
              <span className="min-w-0">
                <strong className="font-semibold">
                  {i + 1}. {s.key}
                </strong>{' '}
                {s.roofPlace || ladderCard.placeNotRecorded}
                {s.serial && <span className="whitespace-nowrap text-ink-2"> · {s.serial}</span>}
              </span>
              <span className="flex-none text-right font-medium">{STOP_WORDS[s.kind]}</span>
            </li>
          ))}
        </ol>
        {stops.length > shown.length && (
          <p className="py-1 text-ink-2">
            {ladderCard.andMore(
              stops.length,
              shown.length,
              listed(stops.slice(STOPS_MAX, STOPS_MAX + 8).map((s) => s.key)),
            )}
            {stops.length > STOPS_MAX + 8 && ' …'}
            {ladderCard.leaveStopsOutFor}
          </p>
        )}
        {stops.length === 0 && <p className="py-1 text-ink-2">{ladderCard.noStopIsChosen}</p>}
      </section>
      <section className="mt-2 border-t-2 border-ink pt-1.5">
        <h2 className="mb-0.5 text-[13px]">{ladderCard.bring}</h2>
        <ul className="list-disc pl-4">
          {spares.units.map((u) => (
            <li key={u.type}>
              {ladderCard.countedCountSpareUnit(u.count)}, {u.type}
            </li>
          ))}
          {spares.connectors.map((c) => (
            <li key={`${c.where} ${c.halves.join()}`}>
              {ladderCard.connectorHalves(c.where, joint(c.halves))}
            </li>
          ))}
          <li>
            {ladderCard.meterRatedFor}
            {readings.length > 0
              ? ladderCard.dcOrMore(
                  Math.ceil(Math.max(...readings.map((r) => r.roof.readings.passing.high)) / 50),
                )
              : ladderCard.theStringsOpenCircuit}
            {ladderCard.ladderFallProtectionLock}
          </li>
        </ul>
      </section>
      <section className="mt-2 border-t-2 border-ink pt-1.5">
        <h2 className="mb-0.5 text-[13px]">{ladderCard.theMeterToString(page.light)}</h2>
        <table className="w-full border-collapse text-left">
          <thead>
            <tr className="border-b border-rule text-xs text-ink-2">
              <th scope="col" className="py-0.5 font-medium">
                {ladderCard.string}
              </th>
              <th scope="col" className="py-0.5 text-right font-medium">
                {ladderCard.inShutdown}
              </th>
              <th scope="col" className="py-0.5 text-right font-medium">
                {ladderCard.passing}
              </th>
              <th scope="col" className="py-0.5 text-right font-medium">
                {ladderCard.asItIsNow}
              </th>
            </tr>
          </thead>
          <tbody>
            {readings.slice(0, STRINGS_MAX).map(({ name, roof: { readings: r } }) => (
              <tr key={name} className="border-b border-rule-faint">
                <th scope="row" className="py-1 font-semibold">
                  {name}
                </th>
                <td className="py-1 text-right">{voltsFrom(r.inShutdown.volts)} V</td>
                <td className="py-1 text-right">
                  {voltsFrom(r.passing.volts)} V
                  <span className="block text-xs text-ink-2">
                    {ladderCard.lowToHigh(voltsFrom(r.passing.low), voltsFrom(r.passing.high))}
                  </span>
                </td>
                <td className="py-1 text-right">{voltsFrom(r.now.volts)} V</td>
              </tr>
            ))}
          </tbody>
        </table>
        <p className="mt-1 text-xs text-ink-2">
          {readings.length > STRINGS_MAX && ladderCard.andMoreStrings(readings.length, STRINGS_MAX)}
          {ladderCard.accordingToTheTypes}
        </p>
      </section>
      <p className="mt-2 border-t-2 border-ink pt-1.5">
        <strong className="font-semibold">{ladderCard.shutdownSwitch}</strong>{' '}
        {site.shutdownSwitchPlace || ladderCard.placeNotRecorded}
        {site.contactName && (
          <>
            <br />
            <strong className="font-semibold">{ladderCard.onSite}</strong> {site.contactName}
            {site.contactPhone && (
              <>
                ,{' '}
                <a href={`tel:${site.contactPhone.replace(/[^+\d]/g, '')}`} className="text-petrol">
                  {site.contactPhone}
                </a>
              </>
            )}
          </>
        )}
      </p>
      <div className="no-print mt-2 flex gap-2">
        <ButtonLink href={back} className="flex-1">
          {ladderCard.backToTheWalk}
        </ButtonLink>
        <Button className="flex-1" onClick={() => window.print()}>
          {ladderCard.print}
        </Button>
      </div>
    </article>
  );
}
