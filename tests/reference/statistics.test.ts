import { describe, expect, it } from 'vitest';
import { cusum } from '../../src/domain/output/cusum';
import {
  boxplotFences,
  mad,
  mean,
  median,
  modifiedZ,
  outliersByBoxplot,
  outliersByHampel,
  outliersByModifiedZ,
  outliersBySigma,
  sigmaMad,
  standardDeviation,
} from '../../src/domain/output/robust';
import { yields } from '../../src/domain/output/yields';
import { casesOf, expectAbsolute, expectRelative } from './tables';

interface RobustOut {
  median: number;
  mad: number;
  sigma_mad: number;
  modified_z: (number | null)[];
  mean: number;
  sd: number;
  q1: number;
  q3: number;
  fence_low: number;
  fence_high: number;
  flag_modified_z_3_5: number[];
  flag_hampel_3: number[];
  flag_boxplot_1_5: number[];
  flag_3_sigma: number[];
}

// robust_statistics.json: Iglewicz & Hoaglin 1993, Hampel, boxplot and 3-sigma rules (Zhao 2013) by numpy; printed:
// 1e-9 relative
describe('robust statistics', () => {
  it.each(casesOf<{ label: string; values: number[] }, RobustOut>('robust_statistics'))(
    '$id: $in.label',
    ({ in: { values }, out }) => {
      const close = (what: string, actual: number, expected: number) =>
        expectRelative(what, actual, expected, 1e-9, 1e-10);
      close('median', median(values), out.median);
      close('mad', mad(values), out.mad);
      close('sigmaMad', sigmaMad(values), out.sigma_mad);
      close('mean', mean(values), out.mean);
      close('sd', standardDeviation(values), out.sd);
      const fences = boxplotFences(values);
      close('q1', fences.q1, out.q1);
      close('q3', fences.q3, out.q3);
      close('low fence', fences.low, out.fence_low);
      close('high fence', fences.high, out.fence_high);
      const scores = modifiedZ(values);
      expect(scores).toHaveLength(out.modified_z.length);
      out.modified_z.forEach((z, index) => expectRelative(`z ${index}`, scores[index], z, 1e-9, 1e-9));
      expect(outliersByModifiedZ(values)).toEqual(out.flag_modified_z_3_5);
      expect(outliersByHampel(values)).toEqual(out.flag_hampel_3);
      expect(outliersByBoxplot(values)).toEqual(out.flag_boxplot_1_5);
      expect(outliersBySigma(values)).toEqual(out.flag_3_sigma);
    },
  );
});

// cusum.json: Page 1954, Montgomery, NIST/SEMATECH e-Handbook 6.3.2.3; tolerance printed there: 1e-9 absolute
describe('cusum', () => {
  it.each(
    casesOf<
      { label: string; values: number[]; target: number; k: number; h: number },
      { s_hi: number[]; s_lo: number[]; first_signal_index: number | null }
    >('cusum'),
  )('$id: $in.label', ({ in: i, out }) => {
    const chart = cusum(i.values, i.target, i.k, i.h);
    expect(chart.high).toHaveLength(out.s_hi.length);
    out.s_hi.forEach((sum, index) => expectAbsolute(`high ${index}`, chart.high[index] ?? NaN, sum, 1e-9));
    out.s_lo.forEach((sum, index) => expectAbsolute(`low ${index}`, chart.low[index] ?? NaN, sum, 1e-9));
    expect(chart.firstSignal).toBe(out.first_signal_index);
  });
});

interface RatioIn {
  label: string;
  p0_w: number;
  gamma_per_c: number;
  interval_h: number;
  temp_module_annual_avg_c: number;
  records: [number, number, number][];
}
type RatioOut = Record<
  | 'energy_kwh'
  | 'insolation_kwh_m2'
  | 'final_yield_h'
  | 'reference_yield_h'
  | 'performance_ratio'
  | 'performance_ratio_stc_corrected'
  | 'performance_ratio_annual_temp_equivalent'
  | 'irradiance_weighted_temp_c',
  number
>;

// performance_ratio.json: IEC 61724-1:2017 clause 10 and NREL/TP-5200-57991, arithmetic of the table; printed: 1e-9
describe('yields and performance ratios', () => {
  it.each(casesOf<RatioIn, RatioOut>('performance_ratio'))('$id: $in.label', ({ in: i, out }) => {
    const result = yields(
      i.records.map(([poaGlobal, temperatureModule, powerOut]) => ({
        poaGlobal,
        temperatureModule,
        powerOut,
      })),
      {
        p0: i.p0_w,
        gammaPmp: i.gamma_per_c,
        intervalH: i.interval_h,
        temperatureModuleAnnual: i.temp_module_annual_avg_c,
      },
    );
    expectRelative('energy', result.energyKWh, out.energy_kwh, 1e-9);
    expectRelative('insolation', result.insolationKWhM2, out.insolation_kwh_m2, 1e-9);
    expectRelative('final yield', result.finalYieldH, out.final_yield_h, 1e-9);
    expectRelative('reference yield', result.referenceYieldH, out.reference_yield_h, 1e-9);
    expectRelative('PR', result.performanceRatio, out.performance_ratio, 1e-9);
    expectRelative('PR at STC', result.performanceRatioStc, out.performance_ratio_stc_corrected, 1e-9);
    expectRelative(
      'PR annual',
      result.performanceRatioAnnual,
      out.performance_ratio_annual_temp_equivalent,
      1e-9,
    );
    expectRelative('temperature', result.irradianceWeightedTemperature, out.irradiance_weighted_temp_c, 1e-9);
    expect(result.completeness).toBe(1);
  });
});
