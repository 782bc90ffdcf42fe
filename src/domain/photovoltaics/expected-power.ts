import { absoluteAirMass, pressureAtAltitude, relativeAirMass } from './irradiance/air-mass';
import { type Irradiance, ineichen } from './irradiance/clear-sky';
import { dniExtra } from './irradiance/extraterrestrial';
import { PLAIN_GLASS, type Glazing, iamPhysical } from './irradiance/incidence';
import { type PlaneIrradiance, type TranspositionModel, planeIrradiance } from './irradiance/transposition';
import { type DiodeReference, diodeParameters } from './module/diode-parameters';
import { type CurvePoints, curvePoints } from './module/single-diode';
import { type Place, type SolarPosition, solarPosition } from './sun/position';
import { dayOfYear } from './sun/time';
import { SAPM_MOUNTS, type SapmMount, temperatureCellSapm } from './temperature/cell';

export interface ExpectedPowerInputs {
  /** ms since 1970-01-01T00:00Z */
  epochMs: number;
  place: Place;
  plane: { surfaceTilt: number; surfaceAzimuth: number; albedo?: number };
  /** 1 to 12 */
  linkeTurbidity: number;
  /** °C */
  temperatureAir: number;
  /** m/s */
  windSpeed: number;
  module: DiodeReference;
  /** Pa; without it the standard atmosphere at the place's altitude. */
  pressure?: number;
  /** TT − UT1, s. */
  deltaT?: number;
  transposition?: TranspositionModel;
  glazing?: Glazing;
  mount?: SapmMount;
}

/** Every step of the chain, so that a reader can check each against its source. */
export interface ExpectedPower {
  sun: SolarPosition;
  dniExtra: number;
  /** null with the sun below the horizon */
  airMassAbsolute: number | null;
  clearSky: Irradiance;
  plane: PlaneIrradiance;
  /** Incidence-angle modifier on the beam. */
  iamBeam: number;
  /** W/m² that reach the cells. */
  effectiveIrradiance: number;
  /** °C */
  temperatureCell: number;
  module: CurvePoints;
}

/**
 * What one module gives under a clear sky, from place and time: solar position, air mass (Kasten & Young), clear sky
 * (Ineichen & Perez), transposition with the apparent zenith, incidence on the beam (Fresnel), cell temperature (SAPM)
 * and the De Soto module; see each function for its source.
 *
 * @throws RangeError naming the parameter
 */
export function expectedPower(inputs: ExpectedPowerInputs): ExpectedPower {
  const { epochMs, place, plane: surface, temperatureAir, windSpeed } = inputs;
  const pressure = inputs.pressure ?? pressureAtAltitude(place.altitude);
  const sun = solarPosition(epochMs, place, { pressure, temperatureAir, deltaT: inputs.deltaT });
  const extra = dniExtra(dayOfYear(epochMs));
  const relative = relativeAirMass(sun.apparentZenith);
  const airMassAbsolute = relative === null ? null : absoluteAirMass(relative, pressure);
  const clearSky =
    airMassAbsolute === null
      ? { ghi: 0, dni: 0, dhi: 0 }
      : ineichen({
          apparentZenith: sun.apparentZenith,
          airMassAbsolute,
          linkeTurbidity: inputs.linkeTurbidity,
          altitude: place.altitude,
          dniExtra: extra,
        });
  const plane = planeIrradiance(
    {
      ...surface,
      ...clearSky,
      solarZenith: sun.apparentZenith,
      solarAzimuth: sun.azimuth,
      dniExtra: extra,
      airMassRelative: relative ?? undefined,
    },
    inputs.transposition ?? 'hay_davies',
  );
  const iamBeam = iamPhysical(plane.aoi, inputs.glazing ?? PLAIN_GLASS);
  const effectiveIrradiance = plane.poaBeam * iamBeam + plane.poaSkyDiffuse + plane.poaGroundDiffuse;
  const temperatureCell = temperatureCellSapm(
    { poaGlobal: plane.poaGlobal, temperatureAir, windSpeed },
    inputs.mount ?? SAPM_MOUNTS.open_rack_glass_polymer,
  );
  return {
    sun,
    dniExtra: extra,
    airMassAbsolute,
    clearSky,
    plane,
    iamBeam,
    effectiveIrradiance,
    temperatureCell,
    module: curvePoints(diodeParameters(inputs.module, effectiveIrradiance, temperatureCell)),
  };
}
