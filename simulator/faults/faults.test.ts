import { describe, expect, it } from 'vitest';
import { frameOf, radioOf } from '../logger/readings';
import { modesOf, plantOf, run, SINCE, stringOf } from '../plant/support';
import type { SitePlant } from '../plant/site-plant';
import type { StringPlant } from '../plant/string-plant';
import { fault, type Fault } from './kinds';

/** Each fault does to the plant what its name says, and to nothing else. */

const CLINIC = 'Weirside Clinic';
const open = (plant: SitePlant, initiator = 'Main initiator') =>
  plant.commands.setInitiator(initiator, true, plant.atS);
const close = (plant: SitePlant, initiator = 'Main initiator') =>
  plant.commands.setInitiator(initiator, false, plant.atS);
const frame = (plant: SitePlant, string: string) =>
  frameOf(
    plant,
    radioOf(plant, plant.plan.loggers[0]?.serial ?? ''),
    stringOf(plant, string).plan.slots.map((s) => s.serial),
  );
const others = (modes: string[], ...positions: number[]) =>
  modes.filter((_, i) => !positions.includes(i + 1));

describe('units', () => {
  it('follow the initiator within 30 s and pass again after it closes', () => {
    const plant = plantOf(CLINIC);
    open(plant);
    run(plant, 29);
    expect(new Set(plant.strings.flatMap((s) => modesOf(plant, s.plan.name)))).toEqual(new Set(['shutdown']));
    close(plant);
    run(plant, 60);
    expect(new Set(plant.strings.flatMap((s) => modesOf(plant, s.plan.name)))).toEqual(new Set(['passing']));
  });

  it('stuck: one unit stays in shutdown, under current at its bypass voltage, its module near open circuit', () => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'stuck', string: 'A2', position: 4, at: 'now' }]);
    const s = stringOf(plant, 'A2');
    expect(modesOf(plant, 'A2')[3]).toBe('shutdown');
    expect(others(modesOf(plant, 'A2'), 4).every((m) => m === 'passing')).toBe(true);
    expect(s.voltageOut[3]).toBeLessThan(-0.3);
    expect(s.voltageIn[3]).toBeGreaterThan((s.voltageIn[4] ?? 0) * 1.05);
  });

  it('stuck at the next release: passes until it has been shut down once', () => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'stuck', string: 'A2', position: 4, at: 'next_release' }]);
    run(plant, 10);
    plant.step(plant.atS + 1);
    const before = modesOf(plant, 'A1');
    expect(before.every((m) => m === 'passing')).toBe(true);
    open(plant);
    run(plant, 30);
    close(plant);
    run(plant, 60);
    expect(modesOf(plant, 'A2')[3]).toBe('shutdown');
    expect(others(modesOf(plant, 'A2'), 4).every((m) => m === 'passing')).toBe(true);
  });

  it.each([
    ['passing', 1],
    ['shutdown', 2],
  ] as const)('not shutting down and claiming %s: the string keeps one module’s voltage', (claims, code) => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'not_shutting_down', string: 'A3', position: 7, claims }]);
    open(plant);
    run(plant, 40);
    expect(modesOf(plant, 'A3')[6]).toBe('passing');
    expect(others(modesOf(plant, 'A3'), 7).every((m) => m === 'shutdown')).toBe(true);
    const s = stringOf(plant, 'A3');
    expect(s.voltage).toBeGreaterThan(30);
    expect(s.voltage).toBeLessThan(60);
    expect(frame(plant, 'A3')?.state[6]).toBe(code);
  });

  it('mute: the unit works on and nothing is heard of it', () => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'unit_mute', string: 'A1', position: 2 }]);
    expect(modesOf(plant, 'A1')[1]).toBe('passing');
    expect(frame(plant, 'A1')?.state[1]).toBeNull();
  });

  it('that nobody has heard pass and do not obey; once heard they follow the command in force', () => {
    const plant = plantOf('Old Tannery Market Hall');
    open(plant);
    run(plant, 40);
    expect(modesOf(plant, 'A1').every((m) => m === 'passing')).toBe(true);
    expect(frame(plant, 'A1')).toBeNull();
    plant.hear(stringOf(plant, 'A1').serials[0] ?? '');
    run(plant, 20);
    expect(modesOf(plant, 'A1')[0]).toBe('shutdown');
    expect(others(modesOf(plant, 'A1'), 1).every((m) => m === 'passing')).toBe(true);
  });

  it('that sit where the drawing has another serial report under their own, the drawn one never', () => {
    const plant = plantOf('Old Tannery Market Hall');
    const b1 = stringOf(plant, 'B1');
    const stranger = plant.plan.strangers.find((s) => s.seat?.position === 2)!;
    const drawn = b1.plan.slots[1]?.serial ?? '';
    expect(plant.seatOf(drawn)).toBeUndefined();
    expect(plant.seatOf(stranger.serial)).toMatchObject({ string: b1, index: 1 });
    plant.hear(stranger.serial);
    const asDrawn = b1.plan.slots.map((s) => s.serial);
    const radio = radioOf(plant, plant.plan.loggers[0]?.serial ?? '');
    expect(frameOf(plant, radio, asDrawn)).toBeNull();
    const placed = asDrawn.map((s) => (s === drawn ? stranger.serial : s));
    expect(frameOf(plant, radio, placed)?.state[1]).toBe(1);
  });

  it('are unpowered in the dark and tell nothing', () => {
    const plant = plantOf(CLINIC, SINCE - 12 * 3600);
    expect(plant.now.elevation).toBeLessThan(-5);
    expect(modesOf(plant, 'A1').every((m) => m === 'unpowered')).toBe(true);
    expect(stringOf(plant, 'A1').voltage).toBe(0);
    expect(frame(plant, 'A1')).toBeNull();
  });
});

describe('modules and wires', () => {
  const at = (faults: Fault[]) => stringOf(plantOf(CLINIC, SINCE, faults), 'A4');
  const well = at([]);

  it('a failed bypass diode takes a third of one module’s voltage and leaves the current', () => {
    const ill = at([{ kind: 'bypass_diode', string: 'A4', position: 5, groups: 1 }]);
    expect((ill.voltageOut[4] ?? 0) / (well.voltageOut[4] ?? 1)).toBeCloseTo(2 / 3, 1);
    expect(ill.current / well.current).toBeGreaterThan(0.97);
    expect((ill.voltageOut[5] ?? 0) / (well.voltageOut[5] ?? 1)).toBeCloseTo(1, 1);
  });

  it('a bad connector takes I·R between the units and the input', () => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'connector', string: 'A4', ohm: 2 }]);
    const s = stringOf(plant, 'A4');
    const input = plant.inputs.find((i) => i.strings.includes(s))!;
    expect(s.voltage - input.voltage).toBeGreaterThan(2 * s.current);
    expect(s.resistance - well.resistance).toBeCloseTo(2, 9);
  });

  it('dirt takes current and hardly any voltage', () => {
    const dirty = at([{ kind: 'soiling', string: 'A4', share: 0.2 }]);
    expect(dirty.current / well.current).toBeCloseTo(0.8, 1);
    expect(dirty.voltage / well.voltage).toBeGreaterThan(0.97);
  });

  it('shade on a few positions makes their diodes conduct', () => {
    const shaded = at([
      { kind: 'shade', string: 'A4', positions: [3, 4], fromHour: 0, toHour: 24, share: 0.95 },
    ]);
    expect(shaded.voltageOut[2]).toBeLessThan(5);
    expect(shaded.voltageOut[7]).toBeGreaterThan(20);
  });

  it('snow leaves every unit of the plane without power', () => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'snow' }]);
    expect(plant.strings.every((s) => modesOf(plant, s.plan.name).every((m) => m === 'unpowered'))).toBe(
      true,
    );
    expect(plant.poaGlobal.get('Clinic roof')).toBe(0);
  });

  it('two swapped units report for the drawing’s place with the other string’s current', () => {
    const plant = plantOf('Beacon Street Flats', SINCE, [
      { kind: 'wrong_string', string: 'A8', position: 4, otherString: 'A9', otherPosition: 4 },
      { kind: 'soiling', string: 'A9', share: 0.3 },
    ]);
    const a8 = frame(plant, 'A8');
    expect((a8?.current[3] ?? 0) / (a8?.current[2] ?? 1)).toBeLessThan(0.8);
    const a9 = frame(plant, 'A9');
    expect((a9?.current[3] ?? 0) / (a9?.current[2] ?? 1)).toBeGreaterThan(1.2);
  });

  it('an isolated string carries no current and the others go on', () => {
    const plant = plantOf('Beacon Street Flats');
    const pair = plant.inputs.find((i) => i.strings.length === 2)!;
    const [first, second] = pair.strings as [StringPlant, StringPlant];
    const before = { first: first.current, input: pair.current };
    expect(before.first).toBeGreaterThan(0.5);
    const { id } = plant.faults.add({ kind: 'string_isolated', string: first.plan.name }, plant.atS + 1);
    run(plant, 5);
    expect(first.current).toBe(0);
    expect(first.voltage).toBeGreaterThan(second.voltage * 1.05); // open circuit
    expect(second.current).toBeGreaterThan(0.5);
    expect(pair.current / before.input).toBeCloseTo(0.5, 1);
    const alone = plant.inputs.find((i) => i.strings.length === 1)!;
    plant.faults.add({ kind: 'string_isolated', string: alone.strings[0]!.plan.name }, plant.atS + 1);
    run(plant, 5);
    expect([alone.current, alone.voltage]).toEqual([0, 0]);
    plant.faults.clear(id, plant.atS + 1);
    run(plant, 5);
    expect(first.current).toBeGreaterThan(0.5);
  });
});

describe('what serves units', () => {
  const STORE = 'Quayside Cold Store';

  it('a transmitter that strings do not hear leaves exactly them in shutdown', () => {
    const plant = plantOf(STORE, SINCE, [
      { kind: 'transmitter_unheard', transmitter: 'T4', strings: ['D1', 'D2'] },
    ]);
    const held = plant.strings.filter((s) => modesOf(plant, s.plan.name).every((m) => m === 'shutdown'));
    expect(held.map((s) => s.plan.name)).toEqual(['D1', 'D2']);
    expect(held.reduce((n, s) => n + s.size, 0)).toBe(20);
  });

  it('a stopped transmitter shuts its strings down, and says so', () => {
    const plant = plantOf(STORE);
    const { id } = plant.faults.add({ kind: 'transmitter_off', transmitter: 'T2' }, plant.atS);
    run(plant, 20);
    expect(modesOf(plant, 'B1').every((m) => m === 'shutdown')).toBe(true);
    expect(modesOf(plant, 'A1').every((m) => m === 'passing')).toBe(true);
    expect(plant.commands.transmitters.get('T2')?.inForce).toBe('keep_alive_lost');
    expect(plant.commands.zones.get('Whole roof')?.inForce).toBe('released');
    plant.faults.clear(id, plant.atS + 1);
    run(plant, 2);
    expect(plant.commands.transmitters.get('T2')).toMatchObject({
      inForce: 'released',
      since: plant.atS - 1,
    });
  });

  it('cross-talk keeps a string passing when its own transmitter stops', () => {
    const plant = plantOf(STORE, SINCE, [{ kind: 'cross_talk', transmitter: 'T1', strings: ['B2'] }]);
    plant.faults.add({ kind: 'transmitter_off', transmitter: 'T2' }, plant.atS);
    run(plant, 20);
    expect(modesOf(plant, 'B1').every((m) => m === 'shutdown')).toBe(true);
    expect(modesOf(plant, 'B2').every((m) => m === 'passing')).toBe(true);
  });

  it.each(['keep_alive_lost', 'power_lost'] as const)(
    '%s of a zone shuts it down like the initiator',
    (how) => {
      const plant = plantOf('Coopers Wharf Gallery');
      plant.faults.add({ kind: 'command_lost', zone: 'Whole roof', how }, plant.atS);
      run(plant, 20);
      expect(plant.strings.every((s) => modesOf(plant, s.plan.name).every((m) => m === 'shutdown'))).toBe(
        true,
      );
      expect(plant.commands.zones.get('Whole roof')?.inForce).toBe(how);
      expect(stringOf(plant, 'A1').voltage).toBeCloseTo(15 * 0.6, 0);
    },
  );

  it('a dead gateway: units that hold pass on unheard; those that do not shut down', () => {
    const dead = (name: string, gateway: number) => {
      const logger = plantOf(name).plan.loggers[0]?.serial ?? '';
      const plant = plantOf(name);
      plant.faults.add({ kind: 'gateway_out', logger, gateway, keeps: false }, plant.atS);
      run(plant, 40);
      return plant;
    };
    const holding = dead('Millrace Housing', 3);
    expect(modesOf(holding, 'C1').every((m) => m === 'passing')).toBe(true);
    expect(frame(holding, 'C1')).toBeNull();
    expect(frame(holding, 'A1')).not.toBeNull();
    expect(modesOf(dead(CLINIC, 1), 'A1').every((m) => m === 'shutdown')).toBe(true);
  });

  it('a gateway that keeps what it hears leaves its units alone', () => {
    const plant = plantOf(CLINIC);
    const logger = plant.plan.loggers[0]?.serial ?? '';
    plant.faults.add({ kind: 'gateway_out', logger, gateway: 1, keeps: true }, plant.atS);
    run(plant, 60);
    expect(modesOf(plant, 'A1').every((m) => m === 'passing')).toBe(true);
    expect(frame(plant, 'A1')).toBeNull();
    const kept = frameOf(
      plant,
      radioOf(plant, logger),
      stringOf(plant, 'A1').plan.slots.map((s) => s.serial),
      true,
    );
    expect(kept?.state.filter((c) => c === 1).length).toBeGreaterThan(9);
  });
});

describe('inverters', () => {
  it('lost grid, and a minute of watching before they run again', () => {
    const plant = plantOf(CLINIC);
    const { id } = plant.faults.add({ kind: 'grid_lost', inverter: 'Inverter 1' }, plant.atS);
    run(plant, 5);
    const inverter = plant.inverters[0]!;
    expect([inverter.status, inverter.acPower]).toEqual(['grid_lost', 0]);
    expect(plant.inverters[1]?.status).toBe('running');
    plant.faults.clear(id, plant.atS + 1);
    run(plant, 30);
    expect(inverter.status).toBe('standby');
    run(plant, 45);
    expect(inverter.status).toBe('running');
  });

  it('an earth fault stops its inverter and shows in the insulation', () => {
    const plant = plantOf(CLINIC, SINCE, [{ kind: 'earth_fault', inverter: 'Inverter 2' }]);
    expect(plant.inverters[1]?.status).toBe('fault');
    expect(plant.inverters[1]?.earthFault).toBe(true);
    expect(plant.inverters[1]?.insulation).toBeLessThan(50);
  });
});

describe('the book of faults', () => {
  it('ends a fault when it is cleared and gives the same list while nothing changes', () => {
    const plant = plantOf(CLINIC);
    const { id } = plant.faults.add({ kind: 'snow' }, plant.atS);
    const list = plant.faults.at(plant.atS + 1);
    expect(plant.faults.at(plant.atS + 2)).toBe(list);
    expect(plant.faults.clear('F99', plant.atS)).toBe(false);
    expect(plant.faults.clear(id, plant.atS + 3)).toBe(true);
    expect(plant.faults.at(plant.atS + 3)).toEqual([]);
    run(plant, 120);
    expect(modesOf(plant, 'A1').every((m) => m === 'passing')).toBe(true);
  });

  it('refuses faults that are none', () => {
    expect(fault.safeParse({ kind: 'stuck', string: 'A1', position: 0 }).success).toBe(false);
    expect(fault.safeParse({ kind: 'curtailed', inverter: 'Inverter 1', share: 2 }).success).toBe(false);
    expect(fault.safeParse({ kind: 'snow', depth: 3 }).success).toBe(false);
  });
});
