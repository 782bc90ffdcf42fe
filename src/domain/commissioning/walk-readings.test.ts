import { describe, expect, it } from 'vitest';
import { MODULE, question } from '../readings/sample-readings';
import { interpretReading } from '../readings/interpret';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { walkReadings } from './walk-readings';

/** Fourteen units of 0.6 V give 8.4 V in shutdown, six give 3.6 V (common practice). */
describe('what a meter should read on the roof', () => {
  const sun = { poaGlobal: 1000, poaRelativeSd: 0.05, temperatureCell: 25, temperatureSd: 2 };
  it.each([
    [14, 8.4],
    [6, 3.6],
  ])('%i units in shutdown: %d V', (units, volts) => {
    expect(walkReadings(question({ units })).inShutdown.volts).toBeCloseTo(volts, 9);
  });
  it('at standard conditions all passing give n times the datasheet’s open-circuit voltage', () => {
    const { passing } = walkReadings(question({ conditions: sun }));
    expect(passing.volts).toBeCloseTo(14 * MODULE.vocRef, 0);
    expect(passing.low).toBeLessThan(passing.volts);
    expect(passing.high).toBeGreaterThan(passing.volts);
  });
  it('monitored units that nobody has heard pass whatever is commanded', () => {
    const { now, passing } = walkReadings(
      question({ unitType: UNIT_PRESETS.monitored, commanded: 'shutdown', heard: 0 }),
    );
    expect(now.volts).toBeCloseTo(passing.volts, 9);
    expect(now.words).toContain('not heard');
  });
  it('twelve heard of fourteen in shutdown leave two modules’ voltage', () => {
    const { now, passing } = walkReadings(
      question({ unitType: UNIT_PRESETS.monitored, commanded: 'shutdown', heard: 12, conditions: sun }),
    );
    expect(now.volts).toBeCloseTo((2 / 14) * passing.volts + 12 * 0.6, 6);
  });
  it('reading just that is taken as expected', () => {
    const asked = question({
      unitType: UNIT_PRESETS.monitored,
      commanded: 'shutdown',
      heard: 14,
      conditions: sun,
    });
    const { now } = walkReadings(asked);
    expect(interpretReading({ ...asked, voltageV: now.volts }).outcome).toBe('as_expected');
  });
});
