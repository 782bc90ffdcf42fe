import { useMemo, useState } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import {
  CONDITIONS,
  moduleLine,
  sheetPoints,
  type CurveSweep,
  type ModuleLine,
} from '../../drawings/module-curve';
import { ModuleCurve } from '../../drawings/ModuleCurve';
import { irradiance, percent, power, celsius } from '../../drawings/numbers';
import { CURVE_KEYS, curveEntry, curveMissing, type FormReading } from './form';
import { fitOf, type FitLine, type ModuleFit } from './fit';
import { curveSheet, equipmentFit } from '../../words/equipment';

const SWEEPS = [
  { value: 'light', label: curveSheet.lessLight },
  { value: 'temperature', label: curveSheet.warmerCells },
] as const;
const VERDICT = {
  good: { tone: 'petrol', shape: '✓', word: curveSheet.fitsWell },
  remarked: { tone: 'rust', shape: '≠', word: curveSheet.pointsFitCoefficientsDont },
  fair: { tone: 'petrol', shape: '≈', word: curveSheet.fits },
  poor: { tone: 'rust', shape: '×', word: curveSheet.doesNotFit },
} as const;

const labelOf = (sweep: CurveSweep) => (line: ModuleLine) =>
  sweep === 'light' ? irradiance(line.poaGlobal) : celsius(line.temperatureCell);
const PLOTS = [
  { show: 'current', heights: [300, 240] },
  { show: 'power', heights: [260, 220] },
] as const;
/** Drawn for a desk and for a phone, so that its words are 12 px on both. */
const WIDTHS = [
  { width: 560, className: 'hidden sm:block' },
  { width: 340, className: 'sm:hidden' },
] as const;
const isMain = (line: ModuleLine) => line.poaGlobal === 1000 && line.temperatureCell === 25;

/** What stands out: far off what the fit can forgive. */
const standsOut = (line: FitLine): boolean =>
  Math.abs(line.off) > (line.perKelvin ? (line.role === 'follows' ? 0.15 : 0.05) : 0.005);

/** The curve that a datasheet gives, drawn while it is typed, and how far it is from each printed figure. */
export function CurveSheet({ reading }: { reading: FormReading }) {
  const [sweep, setSweep] = useState<CurveSweep>('light');
  const fit = useMemo((): ModuleFit | null => {
    const entry = curveEntry(reading);
    return entry && fitOf(entry);
  }, [reading]);
  const lines = useMemo(
    () => (fit ? CONDITIONS[sweep].map((c) => moduleLine(fit.fitted.parameters, c)) : []),
    [fit, sweep],
  );
  if (!fit)
    return (
      <Sheet title={curveSheet.theCurveOfThis} id="curve" className="lg:sticky lg:top-4">
        <Notice kind="empty" title={curveSheet.theCurveAppearsWhen}>
          {curveMissing(reading) > 0
            ? curveSheet.ofToGoThe(curveMissing(reading), CURVE_KEYS.length)
            : curveSheet.thePointsCantBe}
        </Notice>
      </Sheet>
    );
  const { remarks } = fit;
  const verdict = VERDICT[fit.verdict];
  const main = lines.find(isMain);
  return (
    <Sheet
      title={curveSheet.theCurveOfThis}
      id="curve"
      className="lg:sticky lg:top-4"
      aside={
        <Tag tone={verdict.tone} shape={verdict.shape}>
          {verdict.word}
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
      <Segmented
        label={curveSheet.conditions}
        name="conditions"
        options={SWEEPS}
        value={sweep}
        onChange={setSweep}
      />
      {PLOTS.map(({ show, heights }) =>
        WIDTHS.map(({ width, className }, i) => (
          <div key={`${show} ${width}`} className={className}>
            <ModuleCurve
              lines={lines}
              marks={show === 'current' ? sheetPoints(fit.sheet) : sheetPoints(fit.sheet).slice(1, 2)}
              show={show}
              labels={
                sweep === 'temperature' ? 'on_the_fall' : show === 'current' ? 'at_short_circuit' : 'at_peak'
              }
              labelOf={sweep === 'light' && show === 'power' ? (line) => power(line.pmp) : labelOf(sweep)}
              isMain={isMain}
              width={width}
              height={heights[i] ?? 260}
              label={
                show === 'current'
                  ? curveSheet.currentOverVoltageRings(sweep)
                  : curveSheet.powerOverVoltageUnder(main ? curveSheet.atStc(main.pmp) : '')
              }
            />
          </div>
        )),
      )}
      <Table
        caption={curveSheet.eachPrintedFigureBeside}
        rows={fit.lines}
        rowKey={(line) => line.label}
        columns={[
          { key: 'label', label: curveSheet.figure, cell: (line) => line.label },
          { key: 'printed', label: curveSheet.sheet, numeric: true, cell: (line) => line.printed },
          { key: 'fitted', label: curveSheet.curve, numeric: true, cell: (line) => line.fitted },
          {
            key: 'off',
            label: curveSheet.offBy,
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
            label: curveSheet.how,
            from: 'sm',
            cell: (line) => <span className="text-ink-2">{equipmentFit.roles[line.role]}</span>,
          },
        ]}
      />
      <p className="mt-3 text-sm text-ink-2">
        {curveSheet.singleDiodeModelDe(
          fit.fitted.fit.ideality,
          fit.fitted.parameters.resistanceSeries,
          fit.fitted.parameters.resistanceShuntRef,
        )}
      </p>
    </Sheet>
  );
}
