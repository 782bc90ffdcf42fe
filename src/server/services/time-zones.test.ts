import { expect, it } from 'vitest';
import { PLACES } from '../../../simulator/scenarios/places';
import { timeZones } from './time-zones';

it('has the names of today and the older ones, each once, and all can be used', () => {
  const zones = timeZones();
  expect(zones).toEqual(expect.arrayContaining(['Asia/Kolkata', 'Europe/Kyiv', 'Europe/London', 'UTC']));
  expect(new Set(zones).size).toBe(zones.length);
  for (const timeZone of zones) expect(() => new Intl.DateTimeFormat('en', { timeZone })).not.toThrow();
});

it('has the zone of every place that the simulator can be at', () => {
  expect(PLACES.map((p) => p.timeZone).filter((zone) => !timeZones().includes(zone))).toEqual([]);
});
