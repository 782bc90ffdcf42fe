import { datasheetSaid as said } from '../../../words/domain-photovoltaics-module';
import type { ModuleType } from '../../equipment/module-type';
import { checkModuleType } from './check-type';
import { BOLTZMANN_EV, KELVIN, STC, type DiodeReference, diodeParameters } from './diode-parameters';
import { curvePoints, maximumPowerPoint, vocOfDiode } from './single-diode';
import { minimise } from './simplex';

/** How far the fitted module is from its datasheet: (fitted − printed)/printed. */
export interface DatasheetFit {
  quality: 'good' | 'fair' | 'poor';
  voc: number;
  isc: number;
  vmp: number;
  imp: number;
  pmp: number;
  betaVoc: number;
  /** Not fitted: the temperature coefficient of power that follows, an independent check of the sheet. */
  gammaPmp: number;
  /** The diode's ideality n that follows; about 1 for crystalline silicon. */
  ideality: number;
  /** What an engineer should look at, in words; empty when nothing stands out. */
  remarks: string[];
}

export interface FittedModule {
  parameters: DiodeReference;
  fit: DatasheetFit;
}

const KELVIN_REF = STC.temperatureCell + KELVIN;

/** Photocurrent and saturation current that put isc and voc exactly where the datasheet has them; null if none can. */
function referenceWith(
  type: ModuleType,
  idealityVoltageRef: number,
  resistanceSeries: number,
  resistanceShuntRef: number,
): DiodeReference | null {
  const { iscRef, vocRef } = type;
  const drop = iscRef * resistanceSeries;
  const grownVoc = Math.expm1(vocRef / idealityVoltageRef);
  const grownIsc = Math.expm1(drop / idealityVoltageRef);
  const saturationCurrentRef = (iscRef - (vocRef - drop) / resistanceShuntRef) / (grownVoc - grownIsc);
  const photocurrentRef = saturationCurrentRef * grownVoc + vocRef / resistanceShuntRef;
  if (!(saturationCurrentRef > 0 && saturationCurrentRef < 1 && photocurrentRef < 3 * iscRef)) return null;
  return {
    alphaIsc: type.alphaIsc * iscRef,
    idealityVoltageRef,
    photocurrentRef,
    saturationCurrentRef,
    resistanceShuntRef,
    resistanceSeries,
  };
}

/** Slope of a quantity over temperature round 25 °C, relative to its value there, 1/K. */
function relativeSlope(
  reference: DiodeReference,
  of: (p: ReturnType<typeof diodeParameters>) => number,
): number {
  const at = (temperature: number) => of(diodeParameters(reference, STC.poaGlobal, temperature));
  return (at(STC.temperatureCell + 10) - at(STC.temperatureCell - 10)) / (20 * at(STC.temperatureCell));
}

/** Errors over what we would forgive: 0.05 % of vmp and imp, 0.5 % of a usual betaVoc (−0.003 per K). */
function misfit(type: ModuleType, reference: DiodeReference | null): number {
  if (!reference) return 1e12;
  const { imp, vmp } = maximumPowerPoint(diodeParameters(reference, STC.poaGlobal, STC.temperatureCell));
  const beta = relativeSlope(reference, vocOfDiode);
  return (
    ((vmp / type.vmpRef - 1) / 0.0005) ** 2 +
    ((imp / type.impRef - 1) / 0.0005) ** 2 +
    ((beta - type.betaVoc) / 1.5e-5) ** 2
  );
}

/** (fitted − printed)/printed, a printed 0 taken as −0.0001 per K. */
const relativeError = (fitted: number, printed: number): number =>
  ((fitted - printed) / Math.abs(printed === 0 ? 1e-4 : printed)) * (printed > 0 ? 1 : -1);

function remarksOn(type: ModuleType, fit: Omit<DatasheetFit, 'remarks' | 'quality'>): string[] {
  const remarks: string[] = [];
  const percent = (part: number) => `${(100 * part).toFixed(1)} %`;
  if (Math.abs(fit.vmp) > 0.005 || Math.abs(fit.imp) > 0.005) {
    remarks.push(said.maximumPowerPoint(percent(fit.vmp), percent(fit.imp)));
  }
  if (Math.abs(fit.betaVoc) > 0.05) {
    remarks.push(said.betaVoc(percent(fit.betaVoc)));
  }
  if (Math.abs(fit.gammaPmp) > 0.15) {
    remarks.push(said.gammaPmp(percent(fit.gammaPmp)));
  }
  if (fit.ideality < 0.8 || fit.ideality > 1.6) {
    remarks.push(said.ideality(fit.ideality.toFixed(2), type.cellsInSeries));
  }
  return remarks;
}

/**
 * The five single-diode parameters from a datasheet alone. isc and voc are met exactly; modified ideality, series and
 * shunt resistance are found by least squares on vmp, imp and betaVoc (De Soto 2006's conditions, relaxed so that a
 * datasheet that no five parameters can meet still gives the nearest module and says how near it is). gammaPmp is left
 * out of the fit and compared afterwards.
 *
 * @throws RangeError naming the datasheet value that no module can have
 */
export function moduleFromDatasheet(type: ModuleType): FittedModule {
  checkModuleType(type);
  const thermal = type.cellsInSeries * BOLTZMANN_EV * KELVIN_REF;
  const seriesMax = (type.vocRef - type.vmpRef) / type.impRef;
  const load = type.vmpRef / type.impRef;
  // the search runs over unbounded numbers: ideality and shunt by logarithm, series resistance as a share by a logistic
  const decode = ([logIdeality = 0, logitSeries = 0, logShunt = 0]: readonly number[]) =>
    referenceWith(
      type,
      thermal * Math.exp(Math.min(1.5, Math.max(-1.5, logIdeality))),
      seriesMax / (1 + Math.exp(-logitSeries)),
      load * Math.exp(Math.min(12, Math.max(1, logShunt))),
    );
  const starts = [
    [0, -0.5, 4.5],
    [0.2, -1.5, 4],
    [-0.15, 0.5, 6],
  ];
  const best = starts
    .map((start) => minimise((x) => misfit(type, decode(x)), start, [0.1, 0.5, 1]))
    .reduce((a, b) => (b.value < a.value ? b : a));
  const parameters = decode(best.at);
  if (!parameters) throw new RangeError('vocRef, iscRef, vmpRef and impRef belong to no module');

  const points = curvePoints(diodeParameters(parameters, STC.poaGlobal, STC.temperatureCell));
  const errors = {
    voc: points.voc / type.vocRef - 1,
    isc: points.isc / type.iscRef - 1,
    vmp: points.vmp / type.vmpRef - 1,
    imp: points.imp / type.impRef - 1,
    pmp: points.pmp / (type.vmpRef * type.impRef) - 1,
    betaVoc: relativeError(relativeSlope(parameters, vocOfDiode), type.betaVoc),
    gammaPmp: relativeError(
      relativeSlope(parameters, (p) => maximumPowerPoint(p).pmp),
      type.gammaPmp,
    ),
    ideality: parameters.idealityVoltageRef / thermal,
  };
  const worst = Math.max(Math.abs(errors.vmp), Math.abs(errors.imp), Math.abs(errors.betaVoc) / 10);
  return {
    parameters,
    fit: {
      quality: worst < 0.002 ? 'good' : worst < 0.01 ? 'fair' : 'poor',
      ...errors,
      remarks: remarksOn(type, errors),
    },
  };
}
