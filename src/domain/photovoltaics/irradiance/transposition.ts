import { RADIANS, acosDeg, cosDeg, sinDeg } from '../angles';
import { within } from '../range';
import { relativeAirMass } from './air-mass';
import { aoiProjection } from './incidence';

export const TRANSPOSITION_MODELS = ['isotropic', 'hay_davies', 'perez'] as const;
export type TranspositionModel = (typeof TRANSPOSITION_MODELS)[number];

/** Light and geometry; angles in degrees, azimuths clockwise from north, irradiance in W/m². */
export interface TranspositionInputs {
  /** 0 (flat) to 180 (facing down). */
  surfaceTilt: number;
  surfaceAzimuth: number;
  /** 0 to 180. */
  solarZenith: number;
  solarAzimuth: number;
  ghi: number;
  dni: number;
  dhi: number;
  /** Needed by Hay & Davies and Perez. */
  dniExtra: number;
  /** Relative air mass, for Perez; without it Kasten & Young at `solarZenith`. */
  airMassRelative?: number;
  /** Reflectance of the ground, 0 to 1; without it 0.2. */
  albedo?: number;
}

/** Irradiance in the plane by its parts, W/m². */
export interface PlaneIrradiance {
  /** Degrees. */
  aoi: number;
  poaBeam: number;
  poaSkyDiffuse: number;
  poaGroundDiffuse: number;
  poaGlobal: number;
}

/** Sky brightness coefficients f11 f12 f13 f21 f22 f23 by clearness: Perez 1990, table 6 ("all sites composite"). */
const PEREZ_BINS: readonly (readonly [
  limit: number,
  ...f: [number, number, number, number, number, number],
])[] = [
  [1.065, -0.008, 0.588, -0.062, -0.06, 0.072, -0.022],
  [1.23, 0.13, 0.683, -0.151, -0.019, 0.066, -0.029],
  [1.5, 0.33, 0.487, -0.221, 0.055, -0.064, -0.026],
  [1.95, 0.568, 0.187, -0.295, 0.109, -0.152, -0.014],
  [2.8, 0.873, -0.392, -0.362, 0.226, -0.462, 0.001],
  [4.5, 1.132, -1.237, -0.412, 0.288, -0.823, 0.056],
  [6.2, 1.06, -1.6, -0.359, 0.264, -1.127, 0.131],
  [Infinity, 0.678, -0.327, -0.25, 0.156, -1.377, 0.251],
];

function isotropicShare(surfaceTilt: number): number {
  return (1 + cosDeg(surfaceTilt)) / 2;
}

function hayDaviesShare(inputs: TranspositionInputs, projection: number): number {
  const anisotropy = inputs.dni / inputs.dniExtra;
  const beamRatio = Math.max(projection, 0) / Math.max(cosDeg(inputs.solarZenith), 0.01745);
  // a beam beyond the extraterrestrial (a cloud's edge, a wrong sensor) leaves no isotropic part, not a negative one
  return anisotropy * beamRatio + Math.max(1 - anisotropy, 0) * isotropicShare(inputs.surfaceTilt);
}

function perezShare(inputs: TranspositionInputs, projection: number): number {
  const { dhi, dni, solarZenith, surfaceTilt } = inputs;
  const airMass = inputs.airMassRelative ?? relativeAirMass(solarZenith);
  if (dhi === 0 || airMass === null) return 0;
  const zenith = solarZenith * RADIANS;
  const correction = 1.041 * zenith ** 3;
  const clearness = ((dhi + dni) / dhi + correction) / (1 + correction);
  const brightness = (dhi * airMass) / inputs.dniExtra;
  const bin = PEREZ_BINS.find(([limit]) => clearness < limit) ?? PEREZ_BINS[7]!;
  const [, f11, f12, f13, f21, f22, f23] = bin;
  const circumsolar = Math.max(f11 + f12 * brightness + f13 * zenith, 0);
  const horizon = f21 + f22 * brightness + f23 * zenith;
  const share =
    (1 - circumsolar) * isotropicShare(surfaceTilt) +
    (circumsolar * Math.max(projection, 0)) / Math.max(cosDeg(85), cosDeg(solarZenith)) +
    horizon * sinDeg(surfaceTilt);
  return Math.max(share, 0);
}

/**
 * Irradiance in a plane. Beam by geometry, ground as ghi·albedo·(1 − cos tilt)/2, sky by the model:
 * `isotropic` (H.C. Hottel, B.B. Woertz 1942; B.Y.H. Liu, R.C. Jordan; Duffie & Beckman 2.15), `hay_davies` (J.E. Hay,
 * J.A. Davies 1980; Duffie & Beckman 2.16) or `perez` (R. Perez et al., Solar Energy 44 (1990) 271).
 *
 * @throws RangeError naming the parameter: tilt and zenith 0 to 180, azimuths −360 to 360, irradiances 0 to 2000
 */
export function planeIrradiance(
  inputs: TranspositionInputs,
  model: TranspositionModel = 'hay_davies',
): PlaneIrradiance {
  const { surfaceTilt, surfaceAzimuth, solarZenith, solarAzimuth, ghi, dni, dhi } = inputs;
  const albedo = inputs.albedo ?? 0.2;
  within('surfaceTilt', surfaceTilt, 0, 180, 'degrees');
  within('surfaceAzimuth', surfaceAzimuth, -360, 360, 'degrees');
  within('solarZenith', solarZenith, 0, 180, 'degrees');
  within('solarAzimuth', solarAzimuth, -360, 360, 'degrees');
  within('ghi', ghi, 0, 2000, 'W/m²');
  within('dni', dni, 0, 2000, 'W/m²');
  within('dhi', dhi, 0, 2000, 'W/m²');
  within('dniExtra', inputs.dniExtra, 1, 2000, 'W/m²');
  within('albedo', albedo, 0, 1, '');
  if (inputs.airMassRelative !== undefined) within('airMassRelative', inputs.airMassRelative, 0, 50, '');

  const projection = aoiProjection(surfaceTilt, surfaceAzimuth, solarZenith, solarAzimuth);
  const poaBeam = Math.max(dni * projection, 0);
  const poaGroundDiffuse = (ghi * albedo * (1 - cosDeg(surfaceTilt))) / 2;
  const share =
    model === 'isotropic'
      ? isotropicShare(surfaceTilt)
      : model === 'hay_davies'
        ? hayDaviesShare(inputs, projection)
        : perezShare(inputs, projection);
  const poaSkyDiffuse = dhi * share;
  return {
    aoi: acosDeg(projection),
    poaBeam,
    poaSkyDiffuse,
    poaGroundDiffuse,
    poaGlobal: poaBeam + poaSkyDiffuse + poaGroundDiffuse,
  };
}

/** The total of `planeIrradiance`, W/m². */
export function poaGlobal(inputs: TranspositionInputs, model: TranspositionModel = 'hay_davies'): number {
  return planeIrradiance(inputs, model).poaGlobal;
}
