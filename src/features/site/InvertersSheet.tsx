import { memo } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag, type Tone } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { amperes, listed, quantity, volts } from '../../drawings/numbers';
import type { InverterStatus } from '../../domain/verdicts/codes';
import type { InverterNow } from '../../schemas/api/now';
import { invertersSheet } from '../../words/site';

const STATUS: Record<InverterStatus, { word: string; tone: Tone }> = {
  standby: { word: invertersSheet.standby, tone: 'plain' },
  running: { word: invertersSheet.running, tone: 'petrol' },
  derated: { word: invertersSheet.derated, tone: 'rust' },
  curtailed: { word: invertersSheet.curtailed, tone: 'plain' },
  grid_lost: { word: invertersSheet.gridLost, tone: 'rust' },
  fault: { word: invertersSheet.inFault, tone: 'rust' },
};

const insulation = (kilohm: number | null): string =>
  kilohm !== null && kilohm >= 1000 ? quantity(kilohm / 1000, 'MΩ', 1) : quantity(kilohm, 'kΩ');

interface Props {
  inverters: readonly InverterNow[];
  now: string;
  timeZone: string;
  zone: boolean;
}

/** Inverters with what they say of themselves, and their inputs. Their flags are theirs: Wakeline detects neither. */
export const InvertersSheet = memo(function InvertersSheet({ inverters, now, timeZone, zone }: Props) {
  return (
    <Sheet
      id="inverters"
      title={invertersSheet.invertersAndInputs}
      aside={invertersSheet.asTheInvertersReport}
    >
      {inverters.length === 0 && <Notice kind="empty" title={invertersSheet.noInverterIsEntered} />}
      <div className="grid gap-x-10 gap-y-6 lg:grid-cols-2">
        {inverters.map((inverter) => (
          <section key={inverter.name} aria-label={inverter.name} className="min-w-0">
            <div className="flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1">
              <h3 className="text-[15px]">{inverter.name}</h3>
              <span className="flex flex-wrap gap-1">
                {inverter.status && (
                  <Tag tone={STATUS[inverter.status].tone}>{STATUS[inverter.status].word}</Tag>
                )}
                {inverter.arcFlag && (
                  <Tag tone="rust" shape="▲">
                    {invertersSheet.arcFlag}
                  </Tag>
                )}
                {inverter.earthFaultFlag && (
                  <Tag tone="rust" shape="▲">
                    {invertersSheet.earthFaultFlag}
                  </Tag>
                )}
              </span>
            </div>
            <p className="mt-1 text-sm text-ink-2">
              {invertersSheet.acPowerOfAcPower(inverter.acPower, inverter.acPowerMax)}
              {inverter.powerLimit !== null &&
                inverter.powerLimit < inverter.acPowerMax &&
                invertersSheet.limitedTo(inverter.powerLimit)}
              {invertersSheet.insulation(insulation(inverter.insulation))}
              {inverter.at ? (
                <SiteTime at={inverter.at} now={now} timeZone={timeZone} zone={zone} />
              ) : (
                invertersSheet.notReportedYet
              )}
            </p>
            <div className="mt-2 overflow-x-auto">
              <table className="w-full border-collapse text-left">
                <caption className="sr-only">{invertersSheet.inputsOf(inverter.name)}</caption>
                <thead>
                  <tr className="border-b border-rule text-sm text-ink-2">
                    <th scope="col" className="py-1 pr-4 font-medium">
                      {invertersSheet.input}
                    </th>
                    <th scope="col" className="py-1 pr-4 font-medium">
                      {invertersSheet.strings}
                    </th>
                    <th scope="col" className="py-1 pr-4 text-right font-medium">
                      {invertersSheet.voltage}
                    </th>
                    <th scope="col" className="py-1 text-right font-medium">
                      {invertersSheet.current}
                    </th>
                  </tr>
                </thead>
                <tbody>
                  {inverter.inputs.map((input) => (
                    <tr key={input.number} className="border-b border-rule-faint last:border-b-0">
                      <td className="py-1.5 pr-4">{input.number}</td>
                      <td className="py-1.5 pr-4">{listed(input.strings) || '–'}</td>
                      <td className="whitespace-nowrap py-1.5 pr-4 text-right">{volts(input.voltage)}</td>
                      <td className="whitespace-nowrap py-1.5 text-right">{amperes(input.current)}</td>
                    </tr>
                  ))}
                </tbody>
              </table>
            </div>
          </section>
        ))}
      </div>
    </Sheet>
  );
});
