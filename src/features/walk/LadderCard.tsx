import { Caution } from '../../components/ui/Caution';
import { Button, ButtonLink } from '../../components/ui/Button';
import { counted, listed, number } from '../../drawings/numbers';
import { clock, longDate, zoneName } from '../../drawings/times';
import { withQuery } from '../../lib/api';
import type { WalkPage, WalkView } from '../../schemas/api/walk';
import { paths } from '../../schemas/paths';
import { chosenStops, readingsOf, sparesOf, stopsOfPage } from './stops';
import { STOP_WORDS, walkHeading } from './words';

/** Stops and strings that a card of one screen carries; more need two trips. */
const STOPS_MAX = 6;
const STRINGS_MAX = 4;

const voltsFrom = (v: number): string => (v < 20 ? number(v, 1) : number(v));
const joint = (halves: readonly [string | null, string | null]): string =>
  halves[0] && halves[1]
    ? halves[0] === halves[1]
      ? `2 × ${halves[0]}`
      : `${halves[0]} + ${halves[1]}`
    : 'types not entered: read the marks on both halves';

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
        <Caution strong="Shutdown is not isolation.">
          Modules and their leads stay at module voltage in light. Never open a connector under load. Isolate,
          lock out, prove dead with a rated meter; fall protection; qualified people, local code first.
        </Caution>
      </div>
      <section className="border-t-2 border-ink pt-1.5">
        <h2 className="mb-0.5 text-[13px]">Where</h2>
        <ol>
          {shown.map((s, i) => (
            <li key={s.key} className="flex justify-between gap-3 border-b border-rule-faint py-1">
              <span className="min-w-0">
                <strong className="font-semibold">
                  {i + 1}. {s.key}
                </strong>{' '}
                {s.roofPlace || 'place not recorded'}
                {s.serial && <span className="whitespace-nowrap text-ink-2"> · {s.serial}</span>}
              </span>
              <span className="flex-none text-right font-medium">{STOP_WORDS[s.kind]}</span>
            </li>
          ))}
        </ol>
        {stops.length > shown.length && (
          <p className="py-1 text-ink-2">
            and {stops.length - shown.length} more:{' '}
            {listed(stops.slice(STOPS_MAX, STOPS_MAX + 8).map((s) => s.key))}
            {stops.length > STOPS_MAX + 8 && ' …'}. Leave stops out for a card of their own.
          </p>
        )}
        {stops.length === 0 && <p className="py-1 text-ink-2">No stop is chosen.</p>}
      </section>
      <section className="mt-2 border-t-2 border-ink pt-1.5">
        <h2 className="mb-0.5 text-[13px]">Bring</h2>
        <ul className="list-disc pl-4">
          {spares.units.map((u) => (
            <li key={u.type}>
              {counted(u.count, 'spare unit')}, {u.type}
            </li>
          ))}
          {spares.connectors.map((c) => (
            <li key={`${c.where} ${c.halves.join()}`}>
              Connector halves, {c.where}: {joint(c.halves)}
            </li>
          ))}
          <li>
            Meter rated for{' '}
            {readings.length > 0
              ? `${number(Math.ceil(Math.max(...readings.map((r) => r.roof.readings.passing.high)) / 50) * 50)} V DC or more`
              : 'the string’s open-circuit voltage'}
            , ladder, fall protection, lock
          </li>
        </ul>
      </section>
      <section className="mt-2 border-t-2 border-ink pt-1.5">
        <h2 className="mb-0.5 text-[13px]">The meter, + to −, string separated, {page.light}</h2>
        <table className="w-full border-collapse text-left">
          <thead>
            <tr className="border-b border-rule text-xs text-ink-2">
              <th scope="col" className="py-0.5 font-medium">
                String
              </th>
              <th scope="col" className="py-0.5 text-right font-medium">
                in shutdown
              </th>
              <th scope="col" className="py-0.5 text-right font-medium">
                passing
              </th>
              <th scope="col" className="py-0.5 text-right font-medium">
                as it is now
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
                    {voltsFrom(r.passing.low)} to {voltsFrom(r.passing.high)}
                  </span>
                </td>
                <td className="py-1 text-right">{voltsFrom(r.now.volts)} V</td>
              </tr>
            ))}
          </tbody>
        </table>
        <p className="mt-1 text-xs text-ink-2">
          {readings.length > STRINGS_MAX && `And ${readings.length - STRINGS_MAX} more strings. `}
          According to the types entered. At night and under snow 0 V: that proves nothing.
        </p>
      </section>
      <p className="mt-2 border-t-2 border-ink pt-1.5">
        <strong className="font-semibold">Shutdown switch:</strong>{' '}
        {site.shutdownSwitchPlace || 'place not recorded'}
        {site.contactName && (
          <>
            <br />
            <strong className="font-semibold">On site:</strong> {site.contactName}
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
          Back to the walk
        </ButtonLink>
        <Button className="flex-1" onClick={() => window.print()}>
          Print
        </Button>
      </div>
    </article>
  );
}
