import { planeIrradiance } from '../../src/domain/photovoltaics/irradiance/transposition';
import type { PlanePlan } from '../plant/plan';
import type { SkyNow } from './sky';

/** Light in a plane by its parts, W/m²; `beam` is what an unclouded sun gives. */
export interface PlaneLight {
  beam: number;
  diffuse: number;
}

/** Reflection at the glass by angle of incidence, as share let through: a measured-looking curve of our own. */
function glass(aoi: number): number {
  if (aoi >= 89) return 0;
  const x = aoi / 89;
  return 1 - 0.04 * x ** 2 - 0.96 * x ** 9;
}

/**
 * Splits the light in a plane into the beam, which clouds and things cut off place by place, and the rest.
 * Clouds give back part of what they take from the beam as diffuse light.
 */
export function planeLight(now: SkyNow, plane: PlanePlan): PlaneLight {
  if (now.zenith >= 92) return { beam: 0, diffuse: 0 };
  if (now.zenith >= 89.9) {
    // Twilight: what the models of a risen sun leave out.
    const share = (92 - now.zenith) / 2.1;
    return { beam: 0, diffuse: 3.5 * share * share };
  }
  const up = Math.max(0.02, Math.cos((now.zenith * Math.PI) / 180));
  const scattered = now.dniClear * up * now.cover * (0.3 - 0.21 * now.cover);
  const dhi = Math.min(600, now.dhiClear + scattered);
  const beamMean = now.dniClear * (1 - 0.9 * now.cover);
  const parts = planeIrradiance(
    {
      surfaceTilt: plane.surfaceTilt,
      surfaceAzimuth: plane.surfaceAzimuth,
      solarZenith: now.zenith,
      solarAzimuth: now.azimuth,
      ghi: Math.min(1500, dhi + beamMean * up),
      dni: now.dniClear,
      dhi,
      dniExtra: now.dniExtra,
      albedo: plane.albedo,
    },
    // Perez sees the circumsolar and horizon light that simpler models leave out.
    now.cover > 0.8 ? 'isotropic' : 'perez',
  );
  return {
    beam: parts.poaBeam * glass(parts.aoi),
    diffuse: Math.max(0.5, 0.95 * parts.poaSkyDiffuse + parts.poaGroundDiffuse),
  };
}
