import { describe, expect, it } from 'vitest';
import { expectedPower } from '../../src/domain/photovoltaics/expected-power';
import { moduleSheetOf } from '../../src/domain/equipment/module-fields';
import { starterEquipment } from '../../src/domain/equipment/starter';
import { stringSizing } from '../../src/domain/photovoltaics/limits/string-sizing';
import { stringVoltageCold } from '../../src/domain/photovoltaics/limits/string-voltage';
import { pvwattsDc } from '../../src/domain/photovoltaics/module/pvwatts';
import { stringCurveOf } from '../../src/domain/photovoltaics/string/curve';
import type { StringElement } from '../../src/domain/photovoltaics/string/elements';
import { seriesString, stringVoltageAt } from '../../src/domain/photovoltaics/string/series';
import { casesOf, expectRelative, moduleNamed, modulesOf } from './tables';

interface BypassIn {
  module: string;
  n_modules: number;
  temp_cell: number;
  bypass_forward_voltage: number;
  group_irradiance: number[][];
}
interface BypassOut {
  v_oc: number;
  i_sc: number;
  p_mp: number;
  v_mp: number;
  i_mp: number;
  local_maxima: { i: number; v: number; p: number }[];
  points: { i: number; v: number }[];
  n_groups_active_at_mpp: number;
}

// string_bypass.json: module curves by pvlib 0.15.2 (De Soto), summed by the table's own code; tolerance printed there:
// 1e-6 relative on voc, isc, points and pmp, 1e-4 on imp and vmp
describe('series string with bypass groups', () => {
  const modules = modulesOf('string_bypass');
  it.each(casesOf<BypassIn, BypassOut>('string_bypass'))('$id', ({ in: i, out }) => {
    const module = {
      reference: moduleNamed(modules, i.module),
      bypassForwardVoltage: i.bypass_forward_voltage,
    };
    const elements: StringElement[] = i.group_irradiance.map((groups) => ({
      kind: 'module',
      module,
      groups: groups.map((poaGlobal) => ({ poaGlobal, temperatureCell: i.temp_cell })),
    }));
    expect(elements).toHaveLength(i.n_modules);
    const curve = stringCurveOf(elements);
    if (!curve?.mpp) throw new Error('the string gives no power');
    expectRelative('voc', curve.voc, out.v_oc, 1e-6);
    expectRelative('isc', curve.isc, out.i_sc, 1e-6);
    expectRelative('pmp', curve.mpp.p, out.p_mp, 1e-6);
    expectRelative('imp', curve.mpp.i, out.i_mp, 1e-4);
    expectRelative('vmp', curve.mpp.v, out.v_mp, 1e-4);
    expect(curve.groupsAtMpp).toBe(out.n_groups_active_at_mpp);
    expect(curve.localMaxima).toHaveLength(out.local_maxima.length);
    out.local_maxima.forEach((peak, k) => {
      expectRelative(`peak ${k} p`, curve.localMaxima[k]?.p, peak.p, 1e-6);
      expectRelative(`peak ${k} i`, curve.localMaxima[k]?.i, peak.i, 1e-4);
      expectRelative(`peak ${k} v`, curve.localMaxima[k]?.v, peak.v, 1e-4);
    });
    const string = seriesString(elements);
    for (const point of out.points) {
      expectRelative(`v at ${point.i} A`, stringVoltageAt(elements, point.i), point.v, 1e-6);
      expectRelative(`i at ${point.v} V`, string?.currentAt(point.v), point.i, 1e-6, 1e-6);
    }
  });
});

type SizingIn = Record<
  | 'v_oc_stc'
  | 'beta_voc_pct_per_c'
  | 'v_mp_stc'
  | 'beta_vmp_pct_per_c'
  | 'temp_min_c'
  | 'temp_cell_max_c'
  | 'v_max_system'
  | 'v_mppt_min',
  number
>;
interface SizingOut {
  v_oc_cold_module: number;
  v_mp_hot_module: number;
  n_max_coefficient: number;
  n_min: number;
  string_v_oc_cold_at_n_max: number;
  table_690_7_a_factor: number | null;
  n_max_table: number | null;
}

const MODULE = moduleSheetOf(starterEquipment().modules[0] ?? {});

// string_sizing.json: NEC 690.7(A)(1) and Table 690.7(A), arithmetic of the table; printed: 1e-9 relative
describe('string sizing', () => {
  it.each(casesOf<SizingIn, SizingOut>('string_sizing'))('$id', ({ in: i, out }) => {
    const sizing = stringSizing({
      vocRef: i.v_oc_stc,
      vmpRef: i.v_mp_stc,
      betaVoc: i.beta_voc_pct_per_c / 100,
      betaVmp: i.beta_vmp_pct_per_c / 100,
      temperatureMin: i.temp_min_c,
      temperatureCellMax: i.temp_cell_max_c,
      voltageMax: i.v_max_system,
      mpptMin: i.v_mppt_min,
    });
    expectRelative('vocCold', sizing.vocCold, out.v_oc_cold_module, 1e-9);
    expectRelative('vmpHot', sizing.vmpHot, out.v_mp_hot_module, 1e-9);
    expectRelative('vocStringCold', sizing.vocStringCold, out.string_v_oc_cold_at_n_max, 1e-9);
    expect(sizing.most).toBe(out.n_max_coefficient);
    expect(sizing.fewest).toBe(out.n_min);
    expect(sizing.tableFactor).toBe(out.table_690_7_a_factor);
    expect(sizing.mostByTable).toBe(out.n_max_table);
    // the design check of a string adds the same figures up
    const type = { ...MODULE, vocRef: i.v_oc_stc, betaVoc: i.beta_voc_pct_per_c / 100 };
    const cold = stringVoltageCold([{ type, count: out.n_max_coefficient }], i.temp_min_c);
    expectRelative('string voltage', cold.byCoefficient, out.string_v_oc_cold_at_n_max, 1e-9);
    if (out.table_690_7_a_factor !== null)
      expectRelative(
        'by the table',
        cold.byTable,
        out.n_max_coefficient * i.v_oc_stc * out.table_690_7_a_factor,
        1e-9,
      );
  });
});

interface ChainIn {
  time_utc: string;
  latitude: number;
  longitude: number;
  altitude_m: number;
  pressure_pa: number;
  surface_tilt: number;
  surface_azimuth: number;
  linke_turbidity: number;
  albedo: number;
  temp_air: number;
  wind_speed: number;
  module: string;
  pdc0: number;
  gamma_pdc: number;
  delta_t_s: number;
}
type ChainOut = Record<
  | 'apparent_zenith'
  | 'azimuth'
  | 'dni_extra'
  | 'airmass_absolute'
  | 'ghi_clear'
  | 'dni_clear'
  | 'dhi_clear'
  | 'aoi'
  | 'poa_global'
  | 'iam_beam'
  | 'effective_irradiance'
  | 'temp_cell'
  | 'i_sc'
  | 'v_oc'
  | 'i_mp'
  | 'v_mp'
  | 'p_mp'
  | 'pdc_pvwatts',
  number
>;

// expected_power_chain.json: every step by pvlib 0.15.2; tolerance printed there: with SPA 1e-5 relative
describe('expected power, from place and time', () => {
  const modules = modulesOf('expected_power_chain');
  it.each(casesOf<ChainIn, ChainOut>('expected_power_chain'))('$id', ({ in: i, out }) => {
    const result = expectedPower({
      epochMs: Date.parse(i.time_utc),
      place: { latitude: i.latitude, longitude: i.longitude, altitude: i.altitude_m },
      plane: { surfaceTilt: i.surface_tilt, surfaceAzimuth: i.surface_azimuth, albedo: i.albedo },
      linkeTurbidity: i.linke_turbidity,
      temperatureAir: i.temp_air,
      windSpeed: i.wind_speed,
      module: moduleNamed(modules, i.module),
      pressure: i.pressure_pa,
      deltaT: i.delta_t_s,
    });
    const steps: [keyof ChainOut, number | null][] = [
      ['apparent_zenith', result.sun.apparentZenith],
      ['azimuth', result.sun.azimuth],
      ['dni_extra', result.dniExtra],
      ['airmass_absolute', result.airMassAbsolute],
      ['ghi_clear', result.clearSky.ghi],
      ['dni_clear', result.clearSky.dni],
      ['dhi_clear', result.clearSky.dhi],
      ['aoi', result.plane.aoi],
      ['poa_global', result.plane.poaGlobal],
      ['iam_beam', result.iamBeam],
      ['effective_irradiance', result.effectiveIrradiance],
      ['temp_cell', result.temperatureCell],
      ['i_sc', result.module.isc],
      ['v_oc', result.module.voc],
      ['p_mp', result.module.pmp],
      [
        'pdc_pvwatts',
        pvwattsDc(result.effectiveIrradiance, result.temperatureCell, {
          pdc0: i.pdc0,
          gammaPmp: i.gamma_pdc,
        }),
      ],
      ['i_mp', result.module.imp],
      ['v_mp', result.module.vmp],
    ];
    for (const [name, value] of steps) expectRelative(name, value, out[name], 1e-5);
  });
});
