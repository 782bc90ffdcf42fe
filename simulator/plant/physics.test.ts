import { describe, expect, it } from 'vitest';
import { fastModule } from '../../src/domain/photovoltaics/module/fast';
import { plantOf, run, SINCE, stringOf } from './support';

/**
 * The simulated plant is no copy of the model that the judgement uses (own curve, leakage in weak light, thermal lag,
 * spread between modules), yet it must be the same physics: held here against the domain's De Soto model.
 */
describe('a simulated string', () => {
  const plant = plantOf('Old Tannery Market Hall');
  const s = stringOf(plant, 'A1');
  const domain = fastModule(s.moduleType);
  const poa = s.irradiance[0] ?? 0;
  const cell = plant.cells.get(s) ?? 0;

  it('runs near the maximum power point of the domain’s module, and not on it', () => {
    const { vmp, imp } = domain.mpp(poa, cell);
    const mean = s.voltage / s.size;
    expect(Math.abs(mean / vmp - 1)).toBeLessThan(0.035);
    expect(Math.abs(s.current / imp - 1)).toBeLessThan(0.035);
    expect(Math.abs(mean / vmp - 1) + Math.abs(s.current / imp - 1)).toBeGreaterThan(0.0005);
  });

  it('adds its units’ voltages and loses volts in its cables', () => {
    const sum = s.voltageOut.reduce((a, b) => a + b, 0);
    expect(s.voltage).toBeCloseTo(sum, 9);
    const input = plant.inputs.find((i) => i.strings.includes(s));
    expect(input?.voltage).toBeCloseTo(s.voltage - s.current * s.resistance, 6);
    expect(s.resistance).toBeGreaterThan(s.plan.cableResistance);
  });

  it('stands at open circuit when the grid is gone', () => {
    const dark = plantOf('Old Tannery Market Hall', SINCE, [{ kind: 'grid_lost', inverter: 'Inverter 1' }]);
    const open = stringOf(dark, 'A1');
    expect(open.current).toBe(0);
    const voc = domain.voc(open.irradiance[0] ?? 0, dark.cells.get(open) ?? 0);
    expect(Math.abs(open.voltage / open.size / voc - 1)).toBeLessThan(0.02);
  });

  it('spreads module by module by no more than tolerance allows', () => {
    const volts = Array.from(s.voltageOut);
    const mean = s.voltage / s.size;
    expect(Math.max(...volts) - Math.min(...volts)).toBeGreaterThan(0.1);
    for (const v of volts) expect(Math.abs(v / mean - 1)).toBeLessThan(0.05);
  });
});

describe('inputs and inverters', () => {
  it('hold parallel strings at one voltage and sum their currents', () => {
    const plant = plantOf('Beacon Street Flats');
    const input = plant.inputs.find((i) => i.strings.length === 2)!;
    const terminals = input.strings.map((s) => s.voltage - s.current * s.resistance);
    for (const v of terminals) expect(v).toBeCloseTo(input.voltage, 1);
    expect(input.current).toBeCloseTo(
      input.strings.reduce((sum, s) => sum + s.current, 0),
      9,
    );
    expect(input.power).toBeGreaterThan(500);
  });

  it('push the neighbours of a stuck unit towards open circuit, which costs its string current', () => {
    const plant = plantOf('Beacon Street Flats', SINCE, [
      { kind: 'stuck', string: 'B1', position: 1, at: 'now' },
    ]);
    const ill = stringOf(plant, 'B1');
    const well = stringOf(plant, 'B2');
    const perPassing = (s: typeof ill) => {
      const passing = Array.from(s.voltageOut).filter((v) => v > 5);
      return passing.reduce((a, b) => a + b, 0) / passing.length;
    };
    expect(perPassing(ill)).toBeGreaterThan(perPassing(well) * 1.03);
    expect(ill.current).toBeLessThan(well.current * 0.95);
  });

  it('never give more than the inverter’s rating, nor than a curtailment leaves', () => {
    const free = plantOf('Quayside Cold Store');
    for (const i of free.inverters) expect(i.acPower).toBeLessThanOrEqual(i.plan.acPowerMax);
    const curtailed = plantOf('Quayside Cold Store', SINCE, [
      { kind: 'curtailed', inverter: 'Inverter 2', share: 0.3 },
    ]).inverters[1]!;
    expect(curtailed.status).toBe('curtailed');
    expect(curtailed.powerLimit).toBe(Math.round(curtailed.plan.acPowerMax * 0.3));
    expect(Math.abs(curtailed.acPower / curtailed.plan.acPowerMax - 0.3)).toBeLessThan(0.01);
  });

  it('let optimizing units share one current, with outputs below inputs', () => {
    const plant = plantOf('Slate Lane Library');
    const s = stringOf(plant, 'B1');
    expect(s.current).toBeGreaterThan(1);
    for (let i = 0; i < s.size; i++) expect(s.voltageOut[i]).toBeLessThan((s.voltageIn[i] ?? 0) + 0.001);
  });

  it('hold the home run up for a while by their capacitors after the units have let go', () => {
    const plant = plantOf('Weirside Clinic');
    plant.commands.setInitiator('Main initiator', true, plant.atS);
    run(plant, 14);
    const s = stringOf(plant, 'A1');
    const inverter = plant.inverters[0]!;
    expect(s.voltage).toBeLessThan(10);
    expect(inverter.held[0]).toBeGreaterThan(s.voltage * 3);
    run(plant, 60);
    expect(inverter.held[0]).toBeLessThan(10);
  });

  it('count energy up, as power and time say', () => {
    const plant = plantOf('Weirside Clinic');
    const inverter = plant.inverters[0]!;
    const before = inverter.energy;
    const power = inverter.acPower;
    plant.step(plant.atS + 60);
    expect(inverter.energy - before).toBeCloseTo(power / 60, 6);
  });
});

describe('the same plant twice', () => {
  it('does the same, second by second', () => {
    const one = plantOf('Kestrel Row School');
    const other = plantOf('Kestrel Row School');
    for (const p of [one, other]) {
      p.commands.setInitiator('Gym initiator', true, p.atS + 3);
      run(p, 90);
    }
    for (const [k, s] of one.strings.entries()) {
      expect(other.strings[k]?.mode).toEqual(s.mode);
      expect(other.strings[k]?.voltageOut).toEqual(s.voltageOut);
    }
  });
});

describe('a plant looked at for the first time', () => {
  it('goes on where one that has run for hours stands: no jump between history and live', () => {
    const running = plantOf('Weirside Clinic', SINCE - 7200);
    for (let atS = SINCE - 7140; atS <= SINCE; atS += 60) running.step(atS);
    const fresh = plantOf('Weirside Clinic', SINCE);
    for (const [k, s] of running.strings.entries()) {
      expect(fresh.strings[k]?.mode).toEqual(s.mode);
      expect(Math.abs((fresh.strings[k]?.voltage ?? 0) / s.voltage - 1)).toBeLessThan(0.002);
      expect(Math.abs((fresh.strings[k]?.current ?? 0) / s.current - 1)).toBeLessThan(0.01);
    }
  });
});

describe('shade that somebody put up', () => {
  it('is gone when its hours are over', () => {
    const place = plantOf('Beacon Street Flats').plan;
    const hour = ((((SINCE + place.longitude * 240) % 86_400) + 86_400) % 86_400) / 3600;
    const plant = plantOf('Beacon Street Flats', SINCE, [
      {
        kind: 'shade',
        string: 'A1',
        positions: [1, 2, 3],
        fromHour: hour - 0.2,
        toHour: hour + 0.2,
        share: 0.8,
      },
    ]);
    const s = stringOf(plant, 'A1');
    expect(Array.from(s.shadedGroups.slice(0, 4))).toEqual([3, 3, 3, 0]);
    plant.step(SINCE + 1800);
    expect(s.shadedGroups.every((g) => g === 0)).toBe(true);
  });
});
