import { describe, expect, it } from 'vitest';
import { sunRiseSet } from '../../src/domain/photovoltaics/sun/rise-set';
import { DEMO_SEED, demoFleet, demoSite } from '../scenarios/demo';
import { planeLight } from './plane-light';
import { Sky } from './sky';

const SINCE = Date.UTC(2026, 11, 1, 10) / 1000;
const site = demoSite(demoFleet(DEMO_SEED, SINCE), 'Old Tannery Market Hall');
const plane = site.planes[0]!;
const lightAt = (sky: Sky, atS: number, x = 0, y = 0) => {
  const now = sky.at(atS);
  const { beam, diffuse } = planeLight(now, plane);
  return beam * sky.beamThrough(now, x, y) + diffuse;
};

describe('weather', () => {
  it('depends on the moment and the seed alone', () => {
    const one = new Sky(site, 7, SINCE);
    const other = new Sky(site, 7, SINCE);
    for (let i = 0; i < 200; i++) one.at(SINCE + i * 977);
    for (const atS of [SINCE, SINCE - 123_456, SINCE + 50_000]) expect(other.at(atS)).toEqual(one.at(atS));
    expect(new Sky(site, 8, SINCE).at(SINCE).temperatureAir).not.toBe(one.at(SINCE).temperatureAir);
  });

  it('is dark between sunset and sunrise of the sun’s tables', () => {
    const sky = new Sky(site, 7, SINCE);
    const { sunrise, sunset } = sunRiseSet(SINCE * 1000, site, { beyondDay: 'actual' });
    if (sunrise === null || sunset === null) throw new Error('the sun rises at the demo’s places');
    expect(lightAt(sky, sunset / 1000 + 1800)).toBe(0);
    expect(lightAt(sky, sunrise / 1000 - 1800)).toBe(0);
    expect(lightAt(sky, (sunrise + sunset) / 2000)).toBeGreaterThan(300);
  });

  it('stays within what a sun and bright cloud edges can give', () => {
    const sky = new Sky(site, 7, SINCE);
    let brightest = 0;
    for (let i = 0; i < 4000; i++) brightest = Math.max(brightest, lightAt(sky, SINCE - i * 700));
    expect(brightest).toBeGreaterThan(500);
    expect(brightest).toBeLessThan(1350);
  });

  it('moves clouds across the roof: two places see the same edge one after the other', () => {
    const sky = new Sky(
      { ...site, climate: { ...site.climate, clearShare: 0, cloudyShare: 0, fairToday: false } },
      7,
      SINCE,
    );
    const start = sky.at(SINCE).field;
    const metres = 60;
    const speed = Math.hypot(start.velocityX, start.velocityY);
    const x = (start.velocityX / speed) * metres;
    const y = (start.velocityY / speed) * metres;
    let differing = 0;
    let worst = 0;
    for (let i = 0; i < 300; i++) {
      const atS = SINCE + i * 10;
      const here = sky.beamThrough(sky.at(atS), 0, 0);
      const now = sky.at(atS + metres / speed);
      const there = sky.beamThrough(
        { ...now, field: { ...now.field, cover: sky.at(atS).field.cover } },
        x,
        y,
      );
      worst = Math.max(worst, Math.abs(here - there));
      if (Math.abs(here - sky.beamThrough(sky.at(atS), x, y)) > 0.05) differing += 1;
    }
    expect(worst).toBeLessThan(0.02);
    expect(differing).toBeGreaterThan(5);
  });

  it('lets dust gather on dry days and washes it off', () => {
    const sky = new Sky({ ...site, climate: { ...site.climate, soilingPerDay: 0.002 } }, 7, SINCE);
    const losses = Array.from({ length: 120 }, (_, d) => sky.soiling(SINCE - d * 86_400));
    expect(Math.max(...losses)).toBeGreaterThan(0.008);
    expect(Math.min(...losses)).toBe(0);
  });
});
