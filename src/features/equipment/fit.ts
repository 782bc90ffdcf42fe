import type { Entry } from '../../domain/equipment/fields';
import { moduleSheetOf } from '../../domain/equipment/module-fields';
import type { ModuleSheet } from '../../domain/equipment/module-type';
import { moduleFromDatasheet, type FittedModule } from '../../domain/photovoltaics/module/datasheet';
import { number } from '../../drawings/numbers';
import { equipmentFit } from '../../words/equipment';

export interface FitLine {
  label: string;
  printed: string;
  fitted: string;
  /** (fitted − printed)/printed */
  off: number;
  /** Whether the fit was asked to meet it, or the figure only follows. */
  role: 'exact' | 'fitted' | 'follows';
  /** Whether it is a coefficient of temperature: those forgive more. */
  perKelvin: boolean;
}
export interface ModuleFit {
  sheet: ModuleSheet;
  fitted: FittedModule;
  lines: FitLine[];
  /** One sentence: how well the curve meets the sheet. */
  words: string;
  /** good: nothing stands out; remarked: the points are met, and something that follows is not. */
  verdict: 'good' | 'remarked' | 'fair' | 'poor';
  /** What stands out, in the words of the table. */
  remarks: string[];
}

const WORDS = {
  good: equipmentFit.oneModuleCanHave,
  remarked: equipmentFit.theCurveMeetsThe,
  fair: equipmentFit.theCurveComesClose,
  poor: equipmentFit.noSingleModuleHas,
} as const;

/** The curve that a whole datasheet gives, and how it differs from each printed figure. */
export function fitOf(entry: Entry): ModuleFit {
  const sheet = moduleSheetOf(entry);
  const fitted = moduleFromDatasheet(sheet);
  const { fit } = fitted;
  const line = (
    label: string,
    printed: number,
    off: number,
    role: FitLine['role'],
    unit: string,
    digits: number,
  ): FitLine => ({
    label,
    printed: `${number(printed, digits)} ${unit}`,
    fitted: `${number(printed + off * Math.abs(printed), digits)} ${unit}`,
    off,
    role,
    perKelvin: unit === '%',
  });
  const remarks = fit.remarks.map((r) => equipmentFit.remark(r).replace(/(^| )-(?=\d)/g, '$1−'));
  const verdict = fit.quality === 'good' && remarks.length > 0 ? 'remarked' : fit.quality;
  return {
    sheet,
    fitted,
    verdict,
    remarks,
    words: WORDS[verdict],
    lines: [
      line('voc', sheet.vocRef, fit.voc, 'exact', 'V', 2),
      line('isc', sheet.iscRef, fit.isc, 'exact', 'A', 2),
      line('vmp', sheet.vmpRef, fit.vmp, 'fitted', 'V', 2),
      line('imp', sheet.impRef, fit.imp, 'fitted', 'A', 2),
      line('pmp', sheet.vmpRef * sheet.impRef, fit.pmp, 'follows', 'W', 1),
      line(equipmentFit.vocPerK, 100 * sheet.betaVoc, fit.betaVoc, 'fitted', '%', 3),
      line(equipmentFit.pmpPerK, 100 * sheet.gammaPmp, fit.gammaPmp, 'follows', '%', 3),
    ],
  };
}
