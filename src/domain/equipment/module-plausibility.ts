import { checkModuleType } from '../photovoltaics/module/datasheet';
import type { Conflict, Doubt } from './doubt';
import { numberOf, type Entry } from './fields';
import { moduleSheetOf } from './module-fields';

const percent = (part: number, digits = 0): string => `${(100 * part).toFixed(digits).replace('-', '−')} %`;

/** Datasheet values that no module can have together. */
export function moduleConflicts(entry: Entry): Conflict[] {
  const n = (key: string) => numberOf(entry, key);
  const conflicts: Conflict[] = [];
  if (n('vmpRef') >= n('vocRef'))
    conflicts.push({
      field: 'vmpRef',
      message: `vmp (${n('vmpRef')} V) must be below voc (${n('vocRef')} V). Check that the two aren’t swapped.`,
    });
  if (n('impRef') >= n('iscRef'))
    conflicts.push({
      field: 'impRef',
      message: `imp (${n('impRef')} A) must be below isc (${n('iscRef')} A). Check that the two aren’t swapped.`,
    });
  if (conflicts.length === 0) {
    try {
      checkModuleType(moduleSheetOf(entry));
    } catch (error) {
      if (!(error instanceof RangeError)) throw error;
      const cells = n('vocRef') / n('cellsInSeries');
      conflicts.push({
        field: 'cellsInSeries',
        message: `${n('cellsInSeries')} cells make ${cells.toFixed(2)} V a cell; a cell gives 0.25 to 1.5 V. Of half-cut cells count those in series.`,
      });
    }
  }
  return conflicts;
}

/** Values that stand out against what crystalline modules have; from experience where no source is named. */
export function moduleDoubts(entry: Entry): Doubt[] {
  const { vocRef, iscRef, vmpRef, impRef, betaVoc, alphaIsc, gammaPmp, name, lengthM, widthM, fuseMax } =
    moduleSheetOf(entry);
  const doubts: Doubt[] = [];
  const doubt = (key: string, fields: string[], message: string) => doubts.push({ key, fields, message });
  const pmp = vmpRef * impRef;
  const fillFactor = pmp / (vocRef * iscRef);

  if (fillFactor < 0.6 || fillFactor > 0.88)
    doubt(
      'fill_factor',
      ['vocRef', 'iscRef', 'vmpRef', 'impRef'],
      `The fill factor is ${fillFactor.toFixed(2)}; modules have 0.60 to 0.88. One of the four values is probably of another line.`,
    );
  const named = [...name.matchAll(/(?<![\d.,])(\d{2,3})(?=\s*W?\b)/g)]
    .map((m) => Number(m[1]))
    .filter((w) => w >= 50 && w !== 60 && w !== 72 && w !== 108 && w !== 120 && w !== 132 && w !== 144);
  const watts = named.find((w) => Math.abs(w / pmp - 1) < 0.25);
  if (watts !== undefined && Math.abs(watts / pmp - 1) > 0.02)
    doubt(
      'power_in_name',
      ['vmpRef', 'impRef'],
      `vmp times imp is ${pmp.toFixed(0)} W, and the name says ${watts} W.`,
    );
  const typed = Math.abs(100 * betaVoc);
  if (typed < 0.18 || typed > 0.45) {
    const asVolts = typed / vocRef;
    doubt(
      'beta_voc',
      ['betaVoc'],
      asVolts >= 0.0018 && asVolts <= 0.0045
        ? `${percent(betaVoc, 3)}/K is unusual; if the sheet says ${typed.toFixed(3)} V/K, type −${(100 * asVolts).toFixed(3)} %/K.`
        : `${percent(betaVoc, 3)}/K is unusual: crystalline silicon has −0.20 to −0.36 %/K.`,
    );
  }
  if (alphaIsc < 0 || alphaIsc > 0.001)
    doubt(
      'alpha_isc',
      ['alphaIsc'],
      `${percent(alphaIsc, 3)}/K is unusual: crystalline silicon has 0.03 to 0.07 %/K. Check that it isn’t mA/K.`,
    );
  // power falls at least as voc does and current gives a little back, so gamma lies below beta + alpha
  if (gammaPmp > betaVoc + alphaIsc + 0.0002)
    doubt(
      'gamma_pmp',
      ['gammaPmp', 'betaVoc'],
      `Power falls by ${percent(-gammaPmp, 2)}/K, less than voc and isc together let it (${percent(-(betaVoc + alphaIsc), 2)}/K). The two coefficients may be swapped.`,
    );
  if (gammaPmp < betaVoc - 0.003)
    doubt(
      'gamma_pmp',
      ['gammaPmp', 'betaVoc'],
      `Power falls by ${percent(-gammaPmp, 2)}/K, far more than voc (${percent(-betaVoc, 2)}/K). Check both.`,
    );
  const density = pmp / (lengthM * widthM);
  if (density < 90 || density > 260)
    doubt(
      'size',
      ['lengthM', 'widthM'],
      `${pmp.toFixed(0)} W on ${(lengthM * widthM).toFixed(2)} m² are ${density.toFixed(0)} W/m²; modules have 120 to 240 W/m². Sizes are in metres.`,
    );
  if (fuseMax < 1.25 * iscRef)
    doubt(
      'fuse',
      ['fuseMax'],
      `The maximum series fuse is below 125 % of isc (${(1.25 * iscRef).toFixed(1)} A): no fuse would hold in full sun.`,
    );
  return doubts;
}
