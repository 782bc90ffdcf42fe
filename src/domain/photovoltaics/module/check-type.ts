import type { ModuleType } from '../../equipment/module-type';
import { positive, wholeWithin, within } from '../range';

/** V of one cell at STC, wide enough for half-cut cells counted twice and for thin film; from experience. */
const CELL_VOLTAGE = { min: 0.25, max: 1.5 } as const;

/** Refuses a datasheet that no module can have, naming the value. */
export function checkModuleType(type: ModuleType): void {
  positive('vocRef', type.vocRef, 1000, 'V');
  positive('iscRef', type.iscRef, 1000, 'A');
  positive('vmpRef', type.vmpRef, 1000, 'V');
  positive('impRef', type.impRef, 1000, 'A');
  if (type.vmpRef >= type.vocRef) {
    throw new RangeError(`vmpRef (${type.vmpRef} V) must be below vocRef (${type.vocRef} V)`);
  }
  if (type.impRef >= type.iscRef) {
    throw new RangeError(`impRef (${type.impRef} A) must be below iscRef (${type.iscRef} A)`);
  }
  within('betaVoc', type.betaVoc, -0.02, 0, '1/K');
  within('alphaIsc', type.alphaIsc, -0.005, 0.01, '1/K');
  within('gammaPmp', type.gammaPmp, -0.02, 0.01, '1/K');
  wholeWithin('cellsInSeries', type.cellsInSeries, 1, 1000);
  wholeWithin('bypassGroups', type.bypassGroups, 1, 50);
  const voltageOfCell = type.vocRef / type.cellsInSeries;
  if (voltageOfCell < CELL_VOLTAGE.min || voltageOfCell > CELL_VOLTAGE.max) {
    throw new RangeError(
      `cellsInSeries ${type.cellsInSeries} makes ${voltageOfCell.toFixed(2)} V a cell of vocRef ${type.vocRef} V; ` +
        `a cell gives ${CELL_VOLTAGE.min} to ${CELL_VOLTAGE.max} V (of half-cut cells count those in series)`,
    );
  }
}
