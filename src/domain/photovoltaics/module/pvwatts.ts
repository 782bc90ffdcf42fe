import { checkOperation } from './diode-parameters';
import { positive, within } from '../range';

export interface PvwattsModule {
  /** W at STC; of a module, a string or a plant. */
  pdc0: number;
  /** Temperature coefficient of power, 1/K, −0.02 to 0.01. */
  gammaPmp: number;
  /** °C; without it 25. */
  temperatureRef?: number;
}

/**
 * DC power in W by PVWatts version 5: A.P. Dobos, NREL/TP-6A20-62641 (2014), eq. 8. `lowLight` adds the manual's branch
 * for less than 125 W/m² (0.008 G² in place of G), which common programs leave out; never below 0.
 *
 * @param poaGlobal W/m² that reach the cells, 0 to 2000
 * @param temperatureCell °C, −90 to 150
 * @throws RangeError naming the parameter
 */
export function pvwattsDc(
  poaGlobal: number,
  temperatureCell: number,
  module: PvwattsModule,
  lowLight = false,
): number {
  checkOperation(poaGlobal, temperatureCell);
  positive('pdc0', module.pdc0, 1e10, 'W');
  within('gammaPmp', module.gammaPmp, -0.02, 0.01, '1/K');
  const temperatureRef = module.temperatureRef ?? 25;
  within('temperatureRef', temperatureRef, -50, 100, '°C');
  const light = lowLight && poaGlobal < 125 ? (0.008 * poaGlobal * poaGlobal) / 1000 : poaGlobal / 1000;
  return Math.max(0, light * module.pdc0 * (1 + module.gammaPmp * (temperatureCell - temperatureRef)));
}
