import { useState } from 'react';
import { Acknowledge } from '../../components/causes/Acknowledge';
import { alternativesInWords } from '../../components/causes/words';
import { Caution } from '../../components/ui/Caution';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { eventWords } from '../../domain/verdicts/event-words';
import { percent } from '../../drawings/numbers';
import type { CausePage } from '../../schemas/api/causes';
import { paths } from '../../schemas/paths';
import { figuresOf } from './figures';
import { lossWords } from './words';

/** What to treat as live and whom to call: before everything else on the card. */
export function HazardSheet({ cause }: { cause: CausePage }) {
  const [taken, setTaken] = useState(cause.acknowledged);
  return (
    <section aria-label="What to treat as live" className="mb-5">
      <Caution strong="Treat every string of this site as live.">
        Isolate, lock out, prove dead with a rated meter at each home run before anybody touches a conductor.
        Shutdown is not isolation: each module and its leads to its unit stay at module voltage. Local code
        and qualified people come first. Wakeline watches; it can’t switch anything off.
      </Caution>
      <Sheet className="mt-3" title={`Call ${cause.contact?.name || cause.siteName}`}>
        <p className="text-[15px] text-ink-2">
          Who is on site must not rely on the shutdown. A hazard can’t be muted, only taken on with a name.
        </p>
        {cause.contact?.phone && !taken && (
          <p className="mt-2">
            <a
              href={`tel:${cause.contact.phone.replace(/[^\d+]/g, '')}`}
              className="target link inline-flex items-center text-[17px] font-semibold"
            >
              {cause.contact.phone}
            </a>
          </p>
        )}
        <Acknowledge
          cause={cause}
          contact={cause.contact ?? undefined}
          taken={taken ? { key: cause.key, siteId: cause.siteId, ...taken } : undefined}
          now={cause.at}
          timeZone={cause.timeZone}
          onTaken={({ acknowledgement }) => setTaken(acknowledgement)}
        />
      </Sheet>
    </section>
  );
}

function Units({ cause }: { cause: CausePage }) {
  const strings = new Map<string, CausePage['units']>();
  for (const u of cause.units) strings.set(u.stringId, [...(strings.get(u.stringId) ?? []), u]);
  return (
    <ul className="divide-y divide-rule-faint">
      {[...strings].map(([id, units]) => (
        <li key={id} className="grid gap-x-4 py-2 sm:grid-cols-[140px_minmax(0,1fr)]">
          <a
            href={paths.string(cause.siteId, id)}
            className="target flex items-center font-medium text-petrol hover:underline"
          >
            String {units[0]?.stringName}
          </a>
          <p className="self-center text-sm text-ink-2">
            {units.every((u) => u.position === null)
              ? 'the string as a whole; positions unknown'
              : units.map((u) => `${u.position ?? '?'}${u.serial ? ` (${u.serial})` : ''}`).join(', ')}
          </p>
        </li>
      ))}
    </ul>
  );
}

/** One cause: evidence, figures, what else it could be, what to check, what it cost, what happened. */
export function CauseCard({ cause }: { cause: CausePage }) {
  const time = { now: cause.at, timeZone: cause.timeZone };
  const figures = figuresOf(cause);
  const perDay = lossWords(cause.lossWhDay, cause.lossMoneyDay, cause.currency, ' a day');
  const upToNow = lossWords(cause.lossWh, cause.lossMoney, cause.currency);
  return (
    <div className="grid items-start gap-5 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
      <div className="grid min-w-0 gap-5">
        <Sheet id="evidence" title="What shows it" aside={`${percent(cause.confidence)} sure`}>
          <p className="text-[15px] leading-[22px]">{cause.evidence}</p>
          {figures.length > 0 && (
            <dl className="mt-3 grid gap-x-6 border-t border-rule-faint pt-2 sm:grid-cols-2">
              {figures.map((f) => (
                <div
                  key={f.label}
                  className="flex justify-between gap-3 border-b border-rule-faint py-1.5 text-sm"
                >
                  <dt className="text-ink-2">{f.label}</dt>
                  <dd className="text-right font-medium tabular-nums">{f.value}</dd>
                </div>
              ))}
            </dl>
          )}
          {cause.alternatives.length > 0 && (
            <p className="mt-3 text-ink-2">It could also be: {alternativesInWords(cause.alternatives)}.</p>
          )}
        </Sheet>
        <Sheet id="checks" title="What to check first">
          <ol className="divide-y divide-rule-faint">
            {cause.checks.map((c, i) => (
              <li key={c.check} className="grid grid-cols-[24px_minmax(0,1fr)] py-2">
                <span className="tabular-nums text-ink-3">{i + 1}</span>
                <div>
                  <p className="font-medium">{c.check}</p>
                  <p className="text-sm text-ink-2">{c.why}</p>
                  {c.caution && (
                    <div className="mt-2">
                      <Caution strong="Before anybody acts:">{c.caution}</Caution>
                    </div>
                  )}
                </div>
              </li>
            ))}
          </ol>
          <p className="mt-2 text-sm text-ink-2">{cause.checksSource}</p>
        </Sheet>
      </div>
      <div className="grid min-w-0 gap-5">
        <Sheet
          id="units"
          title={isShared(cause.sharedPart) ? `What they share: ${partName(cause.sharedPart)}` : 'Where'}
        >
          <Units cause={cause} />
        </Sheet>
        <Sheet id="loss" title="What it costs">
          {perDay || upToNow ? (
            <dl className="grid gap-1">
              {perDay && (
                <div className="flex justify-between gap-4">
                  <dt className="text-ink-2">About</dt>
                  <dd className="font-semibold tabular-nums">{perDay}</dd>
                </div>
              )}
              {upToNow && (
                <div className="flex justify-between gap-4">
                  <dt className="text-ink-2">So far</dt>
                  <dd className="font-semibold tabular-nums">{upToNow}</dd>
                </div>
              )}
            </dl>
          ) : (
            <p className="text-ink-2">{cause.hazard ? 'It is no matter of energy.' : 'Not known.'}</p>
          )}
          {cause.lossMoney === null && (perDay || upToNow) && (
            <p className="mt-2 text-sm text-ink-2">
              No money is shown:{' '}
              {cause.currency === null
                ? 'the organisation has no currency set'
                : 'the site has no price of a kWh'}
              .
            </p>
          )}
        </Sheet>
        <Sheet id="history" title="What happened">
          <ol className="divide-y divide-rule-faint">
            {cause.events.map((e) => {
              const { words } = eventWords(e.kind, e.detail);
              return (
                <li key={e.id} className="py-2 text-sm">
                  <p className="text-ink-2">
                    <SiteTime at={e.at} {...time} zone />
                  </p>
                  <p className="break-words">{words}</p>
                </li>
              );
            })}
            <li className="py-2 text-sm">
              <p className="text-ink-2">
                <SiteTime at={cause.since} {...time} zone />
              </p>
              <p>It began, as far as reports show</p>
            </li>
          </ol>
        </Sheet>
      </div>
    </div>
  );
}

/** A unit or a string explains only itself. */
const isShared = (part: CausePage['sharedPart']): part is NonNullable<CausePage['sharedPart']> =>
  part !== null && part.kind !== 'unit' && part.kind !== 'string';
const partName = (part: { kind: string; name: string }): string =>
  part.name.toLowerCase().includes(part.kind) ? part.name : `${part.kind} ${part.name}`;
