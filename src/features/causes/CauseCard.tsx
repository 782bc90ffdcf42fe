import { groupedBy } from '../../domain/grouped-by';
import { alternativesInWords } from '../../components/causes/words';
import { Caution } from '../../components/ui/Caution';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { eventWords } from '../../domain/verdicts/event-words';
import type { CausePage } from '../../schemas/api/causes';
import { paths } from '../../schemas/paths';
import { figuresOf } from './figures';
import { lossWords } from './words';
import { causeCard } from '../../words/causes';

function Units({ cause }: { cause: CausePage }) {
  const strings = groupedBy(cause.units, (u) => u.stringId);
  return (
    <ul className="divide-y divide-rule-faint">
      {[...strings].map(([id, units]) => (
        <li key={id} className="grid gap-x-4 py-2 sm:grid-cols-[140px_minmax(0,1fr)]">
          <a
            href={paths.string(cause.siteId, id)}
            className="target flex items-center font-medium text-petrol hover:underline"
          >
            {causeCard.string}
            {units[0]?.stringName}
          </a>
          <p className="self-center text-sm text-ink-2">
            {units.every((u) => u.position === null)
              ? causeCard.theStringAsA
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
  const perDay = lossWords(cause.lossWhDay, cause.lossMoneyDay, cause.currency, causeCard.aDay);
  const upToNow = lossWords(cause.lossWh, cause.lossMoney, cause.currency);
  return (
    <div className="grid items-start gap-5 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
      <div className="grid min-w-0 gap-5">
        <Sheet id="evidence" title={causeCard.whatShowsIt} aside={causeCard.confidenceSure(cause.confidence)}>
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
            <p className="mt-3 text-ink-2">
              {causeCard.itCouldAlsoBe(alternativesInWords(cause.alternatives))}
            </p>
          )}
        </Sheet>
        <Sheet id="checks" title={causeCard.whatToCheckFirst}>
          <ol className="divide-y divide-rule-faint">
            {cause.checks.map((c, i) => (
              <li key={c.check} className="grid grid-cols-[24px_minmax(0,1fr)] py-2">
                <span className="tabular-nums text-ink-3">{i + 1}</span>
                <div>
                  <p className="font-medium">{c.check}</p>
                  <p className="text-sm text-ink-2">{c.why}</p>
                  {c.caution && (
                    <div className="mt-2">
                      <Caution strong={causeCard.beforeAnybodyActs}>{c.caution}</Caution>
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
          title={
            isShared(cause.sharedPart) ? causeCard.whatTheyShare(partName(cause.sharedPart)) : causeCard.where
          }
        >
          <Units cause={cause} />
        </Sheet>
        <Sheet id="loss" title={causeCard.whatItCosts}>
          {perDay || upToNow ? (
            <dl className="grid gap-1">
              {perDay && (
                <div className="flex justify-between gap-4">
                  <dt className="text-ink-2">{causeCard.about}</dt>
                  <dd className="font-semibold tabular-nums">{perDay}</dd>
                </div>
              )}
              {upToNow && (
                <div className="flex justify-between gap-4">
                  <dt className="text-ink-2">{causeCard.untilNow}</dt>
                  <dd className="font-semibold tabular-nums">{upToNow}</dd>
                </div>
              )}
            </dl>
          ) : (
            <p className="text-ink-2">{cause.hazard ? causeCard.itIsNoMatter : causeCard.notKnown}</p>
          )}
          {cause.lossMoney === null && (perDay || upToNow) && (
            <p className="mt-2 text-sm text-ink-2">{causeCard.noMoneyIsShown(cause.currency)}</p>
          )}
        </Sheet>
        <Sheet id="history" title={causeCard.whatHappened}>
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
              <p>{causeCard.itBeganAsFar}</p>
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
