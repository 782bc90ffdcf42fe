import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { NotRead } from '../../components/ui/NotRead';
import { Sheet } from '../../components/ui/Sheet';
import { commandWords } from '../../domain/verdicts/event-words';
import { celsius, irradiance, quantity } from '../../drawings/numbers';
import { Staircase } from '../../drawings/Staircase';
import { clock, clockSeconds, fullTime, shortDate } from '../../drawings/times';
import type { StringPage } from '../../schemas/api/string';
import type { StringMoment } from '../../schemas/api/workbench';
import { momentQuery } from './queries';

interface Conditions {
  current: number | null;
  poaGlobal: number | null;
  temperatureModule: number | null;
}

/** Under what conditions the readings stand. */
function conditions(page: StringPage, at: Conditions): string {
  const { string } = page;
  const load =
    at.current === null
      ? ''
      : at.current > 0.1
        ? `under load, ${quantity(at.current, 'A', 1)}`
        : 'no current';
  const input =
    string.input.strings === 1
      ? `alone on ${string.input.inverter}, input ${string.input.number}`
      : `one of ${string.input.strings} on ${string.input.inverter}, input ${string.input.number}`;
  return [
    load,
    input,
    at.temperatureModule === null ? '' : `module ${celsius(at.temperatureModule)}`,
    at.poaGlobal === null ? '' : `${irradiance(at.poaGlobal)} in plane`,
  ]
    .filter(Boolean)
    .join(' · ');
}

interface Drawn {
  slots: React.ComponentProps<typeof Staircase>['slots'];
  voltage: number | null;
  expectedVoltage: number | null;
  expectedInShutdown: number | null;
  expectedFrom: string;
}

function Drawing({ drawn, notes }: { drawn: Drawn; notes: readonly string[] }) {
  const { expectedFrom, ...drawing } = drawn;
  const assumed = drawn.slots.some((s) => s.assumed);
  return (
    <>
      <Staircase id="stairs-wide" className="hidden sm:block" {...drawing} />
      <div className="sm:hidden">
        <Staircase id="stairs-narrow" width={360} height={260} {...drawing} />
      </div>
      <p className="mt-2 text-sm text-ink-2">
        {drawn.expectedInShutdown !== null
          ? 'Dotted: every unit in shutdown, by the type entered. '
          : drawn.expectedVoltage !== null && `Dotted: expected from ${expectedFrom}. `}
        {assumed && 'Dashed: assumed from what the unit claims, not measured at its output. '}
        {notes.join(' ')}
      </p>
    </>
  );
}

function Past({ moment, page }: { moment: StringMoment; page: StringPage }) {
  const swapped = moment.slots.filter(
    (s) => s.serial !== null && page.string.slots.find((n) => n.position === s.position)?.serial !== s.serial,
  );
  const notes = [
    ...(moment.inForce && moment.inForce !== 'released' ? [`${commandWords(moment.inForce)}.`] : []),
    ...moment.notes,
    ...(swapped.length > 0
      ? [
          `Another unit sat then at ${swapped.map((s) => `${s.position} (${s.serial})`).join(', ')}; it was replaced since.`,
        ]
      : []),
  ];
  if (moment.source === 'nothing')
    return (
      <Notice kind="empty" title="Nothing was reported at that moment">
        No report came within three intervals before it. Choose another moment in the history below.
      </Notice>
    );
  return <Drawing drawn={moment} notes={notes} />;
}

interface Props {
  page: StringPage;
  /** Epoch s; null: now. */
  moment: number | null;
  onNow: () => void;
}

/** While a moment is dragged only where it rests for a moment is asked for. */
const REST_MS = 120;
function useRested(moment: number | null): number | null {
  const [rested, setRested] = useState(moment);
  useEffect(() => {
    const timer = setTimeout(() => setRested(moment), REST_MS);
    return () => clearTimeout(timer);
  }, [moment]);
  return rested;
}

/** The string as a staircase of voltage along its positions, now or at a past minute. */
export function StaircaseSheet({ page, moment, onNow }: Props) {
  const { string, site } = page;
  const rested = useRested(moment);
  const then = useQuery({
    ...momentQuery(string.id, Math.floor((rested ?? 0) / 60) * 60),
    enabled: moment !== null && rested !== null,
  });
  const past = moment === null ? null : (then.data ?? null);
  const title =
    moment === null
      ? 'Voltage staircase, now'
      : `Voltage staircase at ${clock(moment * 1000, site.timeZone)}, ${shortDate(moment * 1000, site.timeZone)}`;
  const readAt = moment === null ? string.at : past?.reportAt ? past.reportAt * 1000 : null;
  return (
    <Sheet
      id="staircase"
      title={title}
      aside={
        <span className="flex flex-wrap items-center gap-x-3">
          {readAt !== null && (
            <span>
              <time dateTime={new Date(readAt).toISOString()} title={fullTime(readAt, site.timeZone)}>
                {clockSeconds(readAt, site.timeZone)}
              </time>
              {` · ${conditions(page, moment === null ? { current: string.current, ...page.light } : { current: past?.current ?? null, poaGlobal: past?.light.poaGlobal ?? null, temperatureModule: past?.light.temperatureModule ?? null })}`}
            </span>
          )}
          {moment !== null && (
            <Button className="!py-0" onClick={onNow}>
              Back to now
            </Button>
          )}
        </span>
      }
    >
      {moment === null ? (
        string.at === null ? (
          <Notice kind="empty" title="No reading yet">
            The staircase appears with the first report of the logger.
          </Notice>
        ) : (
          <Drawing drawn={string} notes={[]} />
        )
      ) : (
        <div aria-busy={then.isFetching}>
          <NotRead
            error={then.error}
            title="That moment could not be fetched"
            kind="failed"
            onRetry={() => then.refetch()}
          />
          {past ? (
            <Past moment={past} page={page} />
          ) : (
            !then.error && <p role="status">Fetching that moment …</p>
          )}
        </div>
      )}
    </Sheet>
  );
}
