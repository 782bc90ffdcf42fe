import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { unitsOf } from '../plant/plan';
import { DEMO_SEED, demoFleet, demoSite } from './demo';
import { HARBOURLINE_SITES, LOWFIELD_SITES } from './demo-sites';
import { solarHour } from './places';
import { readScenario, scenarioFleet } from './read';
import { loggerToken } from './tokens';

const SINCE = Date.UTC(2026, 11, 1, 10) / 1000;
const FILES = join(import.meta.dirname, 'files');

describe('the demo fleet', () => {
  const fleet = demoFleet(DEMO_SEED, SINCE);
  const sites = fleet.organisations.flatMap((o) => o.sites);

  it('is the same for the same seed and moment', () => {
    expect(demoFleet(DEMO_SEED, SINCE)).toEqual(fleet);
  });

  it('has about 5,000 units on a dozen sites of 60 to 2,000', () => {
    const sizes = sites.map(unitsOf);
    expect(sizes.reduce((a, b) => a + b, 0)).toBeGreaterThan(4500);
    for (const n of sizes) expect(n).toBeGreaterThanOrEqual(60);
    for (const n of sizes) expect(n).toBeLessThanOrEqual(2000);
    expect(unitsOf(demoSite(fleet, 'Old Tannery Market Hall'))).toBe(184);
  });

  it('gives every unit a serial of its own, strangers included', () => {
    const serials = sites.flatMap((s) => [
      ...s.strings.flatMap((st) => st.slots.map((slot) => slot.serial)),
      ...s.strangers.map((x) => x.serial),
    ]);
    expect(new Set(serials).size).toBe(serials.length);
    for (const serial of serials) expect(serial).toMatch(/^[A-Z0-9][A-Z0-9-]{3,31}$/);
  });

  const halfHours = Array.from({ length: 48 }, (_, k) => k / 2);
  it.each(halfHours)('begun at %f h UTC: each site stands near the hour of its story', (hour) => {
    const since = Date.UTC(2026, 11, 1) / 1000 + hour * 3600;
    const laidOut = demoFleet(DEMO_SEED, since).organisations.flatMap((o) => o.sites);
    for (const { hour: wanted, spec } of [...LOWFIELD_SITES, ...HARBOURLINE_SITES]) {
      const there = solarHour(since, laidOut.find((s) => s.name === spec.name)?.longitude ?? 0);
      expect([spec.name, Math.abs(there - wanted) < 2]).toEqual([spec.name, true]);
    }
    const hall = laidOut.find((s) => s.stage === 'commissioning');
    const atHall = solarHour(since, hall?.longitude ?? 0);
    expect(atHall).toBeGreaterThan(8.5);
    expect(atHall).toBeLessThan(11.8);
    expect(new Set(laidOut.map((s) => `${s.latitude} ${s.longitude}`)).size).toBe(laidOut.length);
  });

  it.each(halfHours)('begun at %f h UTC: it is day somewhere at any time', (hour) => {
    const since = Date.UTC(2026, 11, 1) / 1000 + hour * 3600;
    const laidOut = demoFleet(DEMO_SEED, since).organisations.flatMap((o) => o.sites);
    for (let later = 0; later < 24; later++) {
      const day = laidOut.filter((s) => {
        const h = solarHour(since + later * 3600, s.longitude);
        return h > 7.5 && h < 16.5;
      });
      expect(day.length).toBeGreaterThan(0);
    }
  });

  it('names only what it defines: planes, inputs, zones, gateways, fault places', () => {
    for (const site of sites) {
      const strings = new Map(site.strings.map((s) => [s.name, s]));
      for (const s of site.strings) {
        expect(site.planes.map((p) => p.name)).toContain(s.plane);
        expect(site.zones.map((z) => z.name)).toContain(s.zone);
        expect(site.inverters.find((i) => i.name === s.inverter)?.inputs).toContain(s.input);
        if (s.kind !== 'shutdown_only')
          for (const slot of s.slots)
            expect(site.loggers[0]?.gateways.map((g) => g.number)).toContain(slot.gateway);
        if (s.kind === 'shutdown_only') expect(s.transmitters.length).toBeGreaterThan(0);
      }
      for (const { fault } of site.faults)
        if ('position' in fault)
          expect(strings.get(fault.string)?.slots.length).toBeGreaterThanOrEqual(fault.position);
    }
  });

  it('makes tokens from the secret and the serial, and from nothing else', () => {
    expect(loggerToken('a', 'LG-1')).toBe(loggerToken('a', 'LG-1'));
    expect(loggerToken('a', 'LG-1')).not.toBe(loggerToken('b', 'LG-1'));
    expect(loggerToken('a', 'LG-1')).not.toBe(loggerToken('a', 'LG-2'));
  });
});

describe('scenario files', () => {
  it.each(readdirSync(FILES))('%s lays out a fleet', (file) => {
    const fleet = readScenario(join(FILES, file), SINCE);
    expect(fleet.organisations.flatMap((o) => o.sites).length).toBeGreaterThan(0);
  });

  it('say what does not fit, and where', () => {
    expect(() => scenarioFleet({ name: 'x', demoSites: [{ name: 'Nowhere' }] }, SINCE)).toThrow('"Nowhere"');
    expect(() =>
      scenarioFleet(
        {
          name: 'x',
          demoSites: [{ name: 'Weirside Clinic', faults: [{ fault: { kind: 'rust' }, sinceS: 0 }] }],
        },
        SINCE,
      ),
    ).toThrow('demoSites.0.faults.0.fault');
  });
});
