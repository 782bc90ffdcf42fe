import { modulePlausibilitySaid as said } from '../../words/domain-equipment-plausibility';
import { checkModuleType } from '../photovoltaics/module/check-type';
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
      message: said.vmpAboveVoc(n('vmpRef'), n('vocRef')),
    });
  if (n('impRef') >= n('iscRef'))
    conflicts.push({
      field: 'impRef',
      message: said.impAboveIsc(n('impRef'), n('iscRef')),
    });
  if (conflicts.length === 0) {
    try {
      checkModuleType(moduleSheetOf(entry));
    } catch (error) {
      if (!(error instanceof RangeError)) throw error;
      const voltsACell = n('vocRef') / n('cellsInSeries');
      conflicts.push({
        field: 'cellsInSeries',
        message: said.cellVoltage(n('cellsInSeries'), voltsACell.toFixed(2)),
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
    doubt('fill_factor', ['vocRef', 'iscRef', 'vmpRef', 'impRef'], said.fillFactor(fillFactor.toFixed(2)));
  const named = [...name.matchAll(/(?<![\d.,])(\d{2,3})(?=\s*W?\b)/g)]
    .map((m) => Number(m[1]))
    .filter((w) => w >= 50 && w !== 60 && w !== 72 && w !== 108 && w !== 120 && w !== 132 && w !== 144);
  const watts = named.find((w) => Math.abs(w / pmp - 1) < 0.25);
  if (watts !== undefined && Math.abs(watts / pmp - 1) > 0.02)
    doubt('power_in_name', ['vmpRef', 'impRef'], said.powerInName(pmp.toFixed(0), watts));
  const typed = Math.abs(100 * betaVoc);
  if (typed < 0.18 || typed > 0.45) {
    const asVolts = typed / vocRef;
    doubt(
      'beta_voc',
      ['betaVoc'],
      asVolts >= 0.0018 && asVolts <= 0.0045
        ? said.betaVocInVolts(percent(betaVoc, 3), typed.toFixed(3), `−${(100 * asVolts).toFixed(3)}`)
        : said.betaVoc(percent(betaVoc, 3)),
    );
  }
  if (alphaIsc < 0 || alphaIsc > 0.001) doubt('alpha_isc', ['alphaIsc'], said.alphaIsc(percent(alphaIsc, 3)));
  // power falls at least as voc does and current gives a little back, so gamma lies below beta + alpha
  if (gammaPmp > betaVoc + alphaIsc + 0.0002)
    doubt(
      'gamma_pmp',
      ['gammaPmp', 'betaVoc'],
      said.gammaPmpSmall(percent(-gammaPmp, 2), percent(-(betaVoc + alphaIsc), 2)),
    );
  if (gammaPmp < betaVoc - 0.003)
    doubt(
      'gamma_pmp',
      ['gammaPmp', 'betaVoc'],
      said.gammaPmpLarge(percent(-gammaPmp, 2), percent(-betaVoc, 2)),
    );
  const density = pmp / (lengthM * widthM);
  if (density < 90 || density > 260)
    doubt(
      'size',
      ['lengthM', 'widthM'],
      said.size(pmp.toFixed(0), (lengthM * widthM).toFixed(2), density.toFixed(0)),
    );
  if (fuseMax < 1.25 * iscRef) doubt('fuse', ['fuseMax'], said.fuse((1.25 * iscRef).toFixed(1)));
  return doubts;
}
