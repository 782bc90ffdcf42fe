import type { ModuleType } from '../domain/equipment/module-type';
import { diodeParameters, type DiodeReference } from '../domain/photovoltaics/module/diode-parameters';
import { curvePoints, voltageAtCurrent } from '../domain/photovoltaics/module/single-diode';
import { drawingsModuleCurve } from '../words/drawings';

export interface CurveCondition {
  /** W/m² */
  poaGlobal: number;
  /** °C */
  temperatureCell: number;
}
export interface ModuleLine extends CurveCondition {
  /** V and A, from short circuit to open circuit. */
  points: readonly { voltage: number; current: number }[];
  /** V, A, W at maximum power. */
  vmp: number;
  imp: number;
  pmp: number;
}

/** Where to draw a module's curve: falling light on a cell of 25 °C, or a warming cell in full light. */
export const CONDITIONS = {
  light: [1000, 800, 600, 400, 200].map((poaGlobal) => ({ poaGlobal, temperatureCell: 25 })),
  temperature: [0, 25, 50, 75].map((temperatureCell) => ({ poaGlobal: 1000, temperatureCell })),
} as const satisfies Record<string, readonly CurveCondition[]>;
export type CurveSweep = keyof typeof CONDITIONS;

const STEPS = 48;

/** The curve of a module under some conditions, with points close together round the knee. */
export function moduleLine(reference: DiodeReference, condition: CurveCondition): ModuleLine {
  const parameters = diodeParameters(reference, condition.poaGlobal, condition.temperatureCell);
  const { isc, vmp, imp, pmp } = curvePoints(parameters);
  const points = Array.from({ length: STEPS + 1 }, (_, i) => {
    const current = isc * (1 - (i / STEPS) ** 2.6);
    return { voltage: Math.max(0, voltageAtCurrent(parameters, current)), current };
  });
  return { ...condition, points, vmp, imp, pmp };
}

/** The points of a datasheet that a curve should pass, at STC. */
export const sheetPoints = (type: ModuleType): { label: string; voltage: number; current: number }[] => [
  { label: drawingsModuleCurve.isc, voltage: 0, current: type.iscRef },
  { label: drawingsModuleCurve.vmpImp, voltage: type.vmpRef, current: type.impRef },
  { label: drawingsModuleCurve.voc, voltage: type.vocRef, current: 0 },
];
