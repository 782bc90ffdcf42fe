import { useMemo, useState } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import type { Entry } from '../../domain/equipment/fields';
import {
  CONDITIONS,
  moduleLine,
  sheetPoints,
  type CurveSweep,
  type ModuleLine,
} from '../../drawings/module-curve';
import { ModuleCurve } from '../../drawings/ModuleCurve';
import { irradiance, number, percent, power, celsius } from '../../drawings/numbers';
import { fitOf, type FitLine, type ModuleFit } from './fit';

interface Props {
  /** null: the datasheet isn't whole yet. */
  entry: Entry | null;
  faults: Readonly<Record<string, string>>;
}

const SWEEPS = [
  { value: 'light', label: 'Less light' },
  { value: 'temperature', label: 'Warmer cells' },
] as const;
const QUALITY = { good: 'Fits well', fair: 'Fits', poor: 'Does not fit' } as const;
const SHAPE = { good: '✓', fair: '≈', poor: '×' } as const;

const labelOf = (sweep: CurveSweep) => (line: ModuleLine) =>
  sweep === 'light' ? irradiance(line.poaGlobal) : celsius(line.temperatureCell);
const isMain = (line: ModuleLine) => line.poaGlobal === 1000 && line.temperatureCell === 25;

/** What stands out: far off what the fit can forgive. */
const standsOut = (line: FitLine): boolean =>
  Math.abs(line.off) > (line.label.endsWith('per K') ? (line.role === 'follows' ? 0.15 : 0.05) : 0.005);

/** The curve that a datasheet gives, drawn while it is typed, and how far it is from each printed figure. */
export function CurveSheet({ entry, faults }: Props) {
  const [sweep, setSweep] = useState<CurveSweep>('light');
  const fit = useMemo((): ModuleFit | null => (entry ? fitOf(entry) : null), [entry]);
  const lines = useMemo(
    () => (fit ? CONDITIONS[sweep].map((c) => moduleLine(fit.fitted.parameters, c)) : []),
    [fit, sweep],
  );
  if (!fit)
    return (
      <Sheet title="The curve of this sheet" id="curve" className="lg:sticky lg:top-4">
        <Notice kind="empty" title="The curve appears when the sheet is whole">
          {Object.keys(faults).length > 0
            ? `${Object.keys(faults).length} values are missing or can’t be.`
            : 'Type the values on the left.'}
        </Notice>
      </Sheet>
    );
  const { quality, remarks } = fit.fitted.fit;
  const main = lines.find(isMain);
  return (
    <Sheet
      title="The curve of this sheet"
      id="curve"
      className="lg:sticky lg:top-4"
      aside={
        <Tag tone={quality === 'poor' ? 'rust' : 'petrol'} shape={SHAPE[quality]}>
          {QUALITY[quality]}
        </Tag>
      }
    >
      <p role="status" className="mb-2">
        {fit.words}
      </p>
      {remarks.length > 0 && (
        <ul className="mb-2 list-disc pl-5 text-ink-2">
          {remarks.map((remark) => (
            <li key={remark}>{remark}.</li>
          ))}
        </ul>
      )}
      <Segmented label="Conditions" name="conditions" options={SWEEPS} value={sweep} onChange={setSweep} />
      <ModuleCurve
        lines={lines}
        marks={sheetPoints(fit.sheet)}
        show="current"
        labelOf={labelOf(sweep)}
        isMain={isMain}
        label={`Current over voltage, ${sweep === 'light' ? 'at 1000 to 200 W/m² and 25 °C' : 'at 0 to 75 °C and 1000 W/m²'}; rings are the datasheet’s points`}
      />
      <ModuleCurve
        lines={lines}
        marks={sheetPoints(fit.sheet).slice(1, 2)}
        show="power"
        labelOf={labelOf(sweep)}
        isMain={isMain}
        height={260}
        label={`Power over voltage under the same conditions${main ? `; ${power(main.pmp)} at STC` : ''}`}
      />
      <Table
        caption="Each printed figure beside the one that the curve has"
        rows={fit.lines}
        rowKey={(line) => line.label}
        columns={[
          { key: 'label', label: 'Figure', cell: (line) => line.label },
          { key: 'printed', label: 'Sheet', numeric: true, cell: (line) => line.printed },
          { key: 'fitted', label: 'Curve', numeric: true, cell: (line) => line.fitted },
          {
            key: 'off',
            label: 'Off by',
            numeric: true,
            cell: (line) => (
              <span className={standsOut(line) ? 'font-semibold text-rust-ink' : ''}>
                {standsOut(line) ? '× ' : ''}
                {percent(line.off, 1)}
              </span>
            ),
          },
          {
            key: 'role',
            label: 'How',
            from: 'sm',
            cell: (line) => <span className="text-ink-2">{line.role}</span>,
          },
        ]}
      />
      <p className="mt-3 text-sm text-ink-2">
        Single-diode model (De Soto 2006) from the sheet alone: ideality {number(fit.fitted.fit.ideality, 2)},
        series resistance {number(fit.fitted.parameters.resistanceSeries, 2)} Ω, shunt{' '}
        {number(fit.fitted.parameters.resistanceShuntRef)} Ω. Rings: the sheet’s points.
      </p>
    </Sheet>
  );
}
