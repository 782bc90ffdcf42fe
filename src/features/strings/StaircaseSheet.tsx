import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { celsius, irradiance, quantity } from '../../drawings/numbers';
import { Staircase } from '../../drawings/Staircase';
import { clockSeconds, fullTime } from '../../drawings/times';
import type { StringPage } from '../../schemas/api/string';

/** Under what conditions the newest readings stand. */
function conditions(page: StringPage): string {
  const { string, light } = page;
  const load =
    string.current === null
      ? ''
      : string.current > 0.1
        ? `under load, ${quantity(string.current, 'A', 1)}`
        : 'no current';
  const input =
    string.input.strings === 1
      ? `alone on ${string.input.inverter}, input ${string.input.number}`
      : `one of ${string.input.strings} on ${string.input.inverter}, input ${string.input.number}`;
  return [
    load,
    input,
    light.temperatureModule === null ? '' : `module ${celsius(light.temperatureModule)}`,
    light.poaGlobal === null ? '' : `${irradiance(light.poaGlobal)} in plane`,
  ]
    .filter(Boolean)
    .join(' · ');
}

function Legend({ page }: { page: StringPage }) {
  const { string } = page;
  const assumed = string.slots.some((s) => s.assumed);
  return (
    <p className="mt-2 text-sm text-ink-2">
      {string.expectedInShutdown !== null
        ? 'Dotted: every unit in shutdown, by the type entered. '
        : string.expectedVoltage !== null && `Dotted: expected from ${string.expectedFrom}. `}
      {assumed && 'Dashed: assumed from what the unit claims, not measured at its output. '}
    </p>
  );
}

/** The string as a staircase of voltage along its positions, now. */
export function StaircaseSheet({ page }: { page: StringPage }) {
  const { string, site } = page;
  const drawing = {
    slots: string.slots,
    voltage: string.voltage,
    expectedVoltage: string.expectedVoltage,
    expectedInShutdown: string.expectedInShutdown,
  };
  return (
    <Sheet
      id="staircase"
      title="Voltage staircase, now"
      aside={
        string.at && (
          <span>
            <time dateTime={string.at} title={fullTime(string.at, site.timeZone)}>
              {clockSeconds(string.at, site.timeZone)}
            </time>
            {` · ${conditions(page)}`}
          </span>
        )
      }
    >
      {string.at === null ? (
        <Notice kind="empty" title="No reading yet">
          The staircase appears with the first report of the logger.
        </Notice>
      ) : (
        <>
          <Staircase id="stairs-wide" className="hidden sm:block" {...drawing} />
          <div className="sm:hidden">
            <Staircase id="stairs-narrow" width={360} height={260} {...drawing} />
          </div>
          <Legend page={page} />
        </>
      )}
    </Sheet>
  );
}
