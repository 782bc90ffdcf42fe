import { vocOf } from '../photovoltaics/module/open-circuit';
import type { Conditions, ReadingQuestion } from './reading';

/** What one passing module and one unit in shutdown give now, and how well that is known. Volts. */
export interface OneUnit {
  voc: number;
  /** Common to all modules of the string: light, temperature, tolerance of the type. */
  vocSd: number;
  /** Each module's own. */
  vocOwnSd: number;
  shutdown: number;
  shutdownSd: number;
  shutdownOwnSd: number;
}

/** Where nobody measured: what each kind of light mostly means. From experience, wide on purpose. */
const USUAL: Record<ReadingQuestion['light'], Conditions> = {
  bright: { poaGlobal: 700, poaRelativeSd: 0.4, temperatureCell: 40, temperatureSd: 12 },
  dull: { poaGlobal: 150, poaRelativeSd: 0.6, temperatureCell: 18, temperatureSd: 9 },
  snow: { poaGlobal: 25, poaRelativeSd: 0.9, temperatureCell: -2, temperatureSd: 5 },
  night: { poaGlobal: 2, poaRelativeSd: 1, temperatureCell: 8, temperatureSd: 8 },
};
/** Tolerance of voc of a delivery against its sheet (IEC 61215 sheets state ±3 %, taken as two standard deviations). */
const TYPE_TOLERANCE = 0.015;
/** Spread of modules within a delivery; from experience. */
const MISMATCH = 0.006;
/** Share of a unit's shutdown voltage that a low-impedance meter leaves standing. From experience. */
const PULLED_DOWN = { mean: 0.6, sd: 0.25 } as const;

/** Thermal voltage over a cell, V: kT/q. */
const thermalV = (celsius: number): number => 8.617_333e-5 * (celsius + 273.15);

export function oneUnit(question: ReadingQuestion): OneUnit {
  const { module, meter } = question;
  const c = question.conditions ?? USUAL[question.light];
  const voc = vocOf(module, c.poaGlobal, c.temperatureCell);
  const byLight = module.cellsInSeries * thermalV(c.temperatureCell) * Math.log(1 + c.poaRelativeSd);
  const byTemperature = Math.abs(module.betaVoc) * module.vocRef * c.temperatureSd;
  const { nominal, min, max } = question.unitType.shutdownVoltage;
  const width = max - min;
  const pulled = meter.mode === 'low_impedance' ? PULLED_DOWN : { mean: 1, sd: 0 };
  return {
    voc,
    vocSd: Math.hypot(TYPE_TOLERANCE * voc, byLight, byTemperature),
    vocOwnSd: MISMATCH * voc,
    shutdown: nominal * pulled.mean,
    shutdownSd: Math.hypot((width / 4) * pulled.mean, nominal * pulled.sd),
    shutdownOwnSd: (width / 6) * pulled.mean,
  };
}
