import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { NotRead } from '../../components/ui/NotRead';
import { Sheet } from '../../components/ui/Sheet';
import { commandWords } from '../../domain/verdicts/command-words';
import { Staircase } from '../../drawings/Staircase';
import { clockSeconds, fullTime } from '../../drawings/times';
import type { StringPage } from '../../schemas/api/string';
import type { StringMoment } from '../../schemas/api/workbench';
import { momentQuery } from './queries';
import { staircaseSheet } from '../../words/strings';

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
        ? staircaseSheet.underLoad(at.current)
        : staircaseSheet.noCurrent;
  const input =
    string.input.strings === 1
      ? staircaseSheet.aloneOnInput(string.input.inverter, string.input.number)
      : staircaseSheet.oneOfOnInput(string.input.strings, string.input.inverter, string.input.number);
  return [
    load,
    input,
    at.temperatureModule === null ? '' : staircaseSheet.moduleTemperatureModule(at.temperatureModule),
    at.poaGlobal === null ? '' : staircaseSheet.inPlane(at.poaGlobal),
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
          ? staircaseSheet.dottedEveryUnitIn
          : drawn.expectedVoltage !== null && staircaseSheet.dottedExpectedFrom(expectedFrom)}
        {assumed && staircaseSheet.dashedAssumedFromWhat}
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
      ? [staircaseSheet.anotherUnitSatThen(swapped.map((s) => `${s.position} (${s.serial})`).join(', '))]
      : []),
  ];
  if (moment.source === 'nothing')
    return (
      <Notice kind="empty" title={staircaseSheet.nothingWasReportedAt}>
        {staircaseSheet.noReportCameWithin}
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
      ? staircaseSheet.voltageStaircaseNow
      : staircaseSheet.voltageStaircaseAt(moment, site.timeZone);
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
              {staircaseSheet.backToNow}
            </Button>
          )}
        </span>
      }
    >
      {moment === null ? (
        string.at === null ? (
          <Notice kind="empty" title={staircaseSheet.noReadingYet}>
            {staircaseSheet.theStaircaseAppearsWith}
          </Notice>
        ) : (
          <Drawing drawn={string} notes={[]} />
        )
      ) : (
        <div aria-busy={then.isFetching}>
          <NotRead
            error={then.error}
            title={staircaseSheet.thatMomentCouldNot}
            kind="failed"
            onRetry={() => then.refetch()}
          />
          {past ? (
            <Past moment={past} page={page} />
          ) : (
            !then.error && <p role="status">{staircaseSheet.fetchingThatMoment}</p>
          )}
        </div>
      )}
    </Sheet>
  );
}
