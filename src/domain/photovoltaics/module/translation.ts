import { within } from '../range';
import { checkOperation } from './diode-parameters';

/** A measured point of a curve, and the conditions it was measured under. */
export interface MeasuredPoint {
  /** A */
  current: number;
  /** V */
  voltage: number;
  /** Short-circuit current of the same curve, A. */
  isc: number;
  /** W/m², above 0 to 2000. */
  poaGlobal: number;
  /** °C, −90 to 150. */
  temperatureCell: number;
}

/** What a device's curve does with temperature and current; absolute, unlike a datasheet's relative coefficients. */
export interface TranslationCoefficients {
  /** A/K */
  alphaIsc: number;
  /** V/K, negative. */
  betaVoc: number;
  /** Ω */
  resistanceSeries: number;
  /** Curve correction factor, Ω/K. */
  kappa: number;
}

/**
 * A point of a curve brought to other conditions: IEC 60891, correction procedure 1 (formula from memory and from the
 * literature; the list of procedures from the standard's preview). Good for irradiances within about a third of each
 * other.
 *
 * @throws RangeError naming the parameter
 */
export function translatePoint(
  point: MeasuredPoint,
  to: { poaGlobal: number; temperatureCell: number },
  coefficients: TranslationCoefficients,
): { current: number; voltage: number } {
  within('point.poaGlobal', point.poaGlobal, 1, 2000, 'W/m²');
  checkOperation(point.poaGlobal, point.temperatureCell);
  checkOperation(to.poaGlobal, to.temperatureCell);
  within('current', point.current, -1e5, 1e5, 'A');
  within('voltage', point.voltage, -1e5, 1e5, 'V');
  within('isc', point.isc, 0, 1e5, 'A');
  const { alphaIsc, betaVoc, resistanceSeries, kappa } = coefficients;
  within('alphaIsc', alphaIsc, -100, 100, 'A/K');
  within('betaVoc', betaVoc, -100, 100, 'V/K');
  within('resistanceSeries', resistanceSeries, 0, 1000, 'Ω');
  within('kappa', kappa, -10, 10, 'Ω/K');
  const rise = to.temperatureCell - point.temperatureCell;
  const current = point.current + point.isc * (to.poaGlobal / point.poaGlobal - 1) + alphaIsc * rise;
  const voltage =
    point.voltage - resistanceSeries * (current - point.current) - kappa * current * rise + betaVoc * rise;
  return { current, voltage };
}
