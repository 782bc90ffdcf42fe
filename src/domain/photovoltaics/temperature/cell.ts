import { within } from '../range';

/** What a cell's temperature follows from. */
export interface Exposure {
  /** W/m², 0 to 2000. */
  poaGlobal: number;
  /** °C, −90 to 70. */
  temperatureAir: number;
  /** m/s, 0 to 60. */
  windSpeed: number;
}

export interface SapmMount {
  a: number;
  b: number;
  /** K between cell and back at 1000 W/m². */
  deltaT: number;
}

/** D.L. King, W.E. Boyson, J.A. Kratochvil, SAND2004-3535 (2004), table 1. */
export const SAPM_MOUNTS = {
  open_rack_glass_glass: { a: -3.47, b: -0.0594, deltaT: 3 },
  close_mount_glass_glass: { a: -2.98, b: -0.0471, deltaT: 1 },
  open_rack_glass_polymer: { a: -3.56, b: -0.075, deltaT: 3 },
  insulated_back_glass_polymer: { a: -2.81, b: -0.0455, deltaT: 0 },
} as const satisfies Record<string, SapmMount>;
export type SapmMountName = keyof typeof SAPM_MOUNTS;

function checkExposure({ poaGlobal, temperatureAir, windSpeed }: Exposure): void {
  within('poaGlobal', poaGlobal, 0, 2000, 'W/m²');
  within('temperatureAir', temperatureAir, -90, 70, '°C');
  within('windSpeed', windSpeed, 0, 60, 'm/s');
}

/** Back of the module, °C: King 2004 eq. 11. */
export function temperatureModuleSapm(
  exposure: Exposure,
  mount: SapmMount = SAPM_MOUNTS.open_rack_glass_polymer,
): number {
  checkExposure(exposure);
  within('a', mount.a, -10, 0, '');
  within('b', mount.b, -1, 0, '');
  return exposure.poaGlobal * Math.exp(mount.a + mount.b * exposure.windSpeed) + exposure.temperatureAir;
}

/** Cell, °C: King 2004 eq. 11 and 12. */
export function temperatureCellSapm(
  exposure: Exposure,
  mount: SapmMount = SAPM_MOUNTS.open_rack_glass_polymer,
): number {
  within('deltaT', mount.deltaT, -5, 20, 'K');
  return temperatureModuleSapm(exposure, mount) + (exposure.poaGlobal / 1000) * mount.deltaT;
}

/**
 * Module, °C: D. Faiman, Prog. Photovolt. 16 (2008) 307.
 *
 * @param u0 W/(m² K), 1 to 200
 * @param u1 W s/(m³ K), 0 to 50
 */
export function temperatureFaiman(exposure: Exposure, u0 = 25, u1 = 6.84): number {
  checkExposure(exposure);
  within('u0', u0, 1, 200, 'W/(m² K)');
  within('u1', u1, 0, 50, 'W s/(m³ K)');
  return exposure.temperatureAir + exposure.poaGlobal / (u0 + u1 * exposure.windSpeed);
}

/** Cell, °C, by NOCT alone, blind to wind: R.G. Ross 1981. `noct` 20 to 90 °C. */
export function temperatureCellNoct(poaGlobal: number, temperatureAir: number, noct: number): number {
  checkExposure({ poaGlobal, temperatureAir, windSpeed: 0 });
  within('noct', noct, 20, 90, '°C');
  return temperatureAir + ((noct - 20) * poaGlobal) / 800;
}

export interface NoctMounting {
  /** °C, 20 to 90. */
  noct: number;
  /** 0 to 0.6. */
  moduleEfficiency: number;
  /** Stories above the ground: 1, or 2 and more. */
  arrayHeight?: 1 | 2;
  /** Inches between module and roof; without it 4 (no correction). */
  mountStandoff?: number;
  /** Transmittance times absorptance; without it 0.9. */
  transmittanceAbsorptance?: number;
}

/** K added to NOCT where modules sit close to the roof (Gilman 2018, section 10.6). */
function standoffCorrection(standoff: number): number {
  if (standoff <= 0) return 0; // building-integrated: no correction there
  if (standoff < 0.5) return 18;
  if (standoff < 1.5) return 11;
  if (standoff < 2.5) return 6;
  if (standoff <= 3.5) return 2;
  return 0;
}

/**
 * Cell, °C, by NOCT with wind and efficiency: P. Gilman et al., NREL/TP-6A20-67399 (2018), section 10.6. Power that
 * leaves as electricity does not heat, and the wind is brought down to the height of the array.
 */
export function temperatureCellNoctWind(exposure: Exposure, mounting: NoctMounting): number {
  checkExposure(exposure);
  const { noct, moduleEfficiency, arrayHeight = 1, mountStandoff = 4 } = mounting;
  const absorbed = mounting.transmittanceAbsorptance ?? 0.9;
  within('noct', noct, 20, 90, '°C');
  within('moduleEfficiency', moduleEfficiency, 0, 0.6, '');
  within('transmittanceAbsorptance', absorbed, 0.5, 1, '');
  within('mountStandoff', mountStandoff, 0, 100, 'inches');
  const wind = exposure.windSpeed * (arrayHeight === 1 ? 0.51 : 0.61);
  const rise = (exposure.poaGlobal / 800) * (noct + standoffCorrection(mountStandoff) - 20);
  return exposure.temperatureAir + (rise * (1 - moduleEfficiency / absorbed) * 9.5) / (5.7 + 3.8 * wind);
}
