import type { ModuleType } from '../../equipment/module-type';
import { within } from '../range';
import { BOLTZMANN_EV, checkOperation, KELVIN, STC } from './diode-parameters';

/**
 * Open-circuit voltage in V from the datasheet alone:
 * vocRef·(1 + betaVoc·(T − 25)) + cellsInSeries·n·kT/q·ln(G/1000), never below 0.
 *
 * @param poaGlobal W/m², 0 to 2000
 * @param temperatureCell °C, −90 to 150
 * @param ideality n, 0.5 to 3
 * @throws RangeError naming the parameter
 */
export function vocOf(type: ModuleType, poaGlobal: number, temperatureCell: number, ideality = 1): number {
  checkOperation(poaGlobal, temperatureCell);
  within('ideality', ideality, 0.5, 3, '');
  if (poaGlobal === 0) return 0;
  const thermal = type.cellsInSeries * ideality * BOLTZMANN_EV * (temperatureCell + KELVIN);
  const warm = type.vocRef * (1 + type.betaVoc * (temperatureCell - STC.temperatureCell));
  return Math.max(0, warm + thermal * Math.log(poaGlobal / STC.poaGlobal));
}
