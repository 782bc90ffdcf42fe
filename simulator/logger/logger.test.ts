import { describe, expect, it } from 'vitest';
import {
  FRAME_RANGES,
  framesEnvelope,
  loggerMessage,
  type Frame,
  type FrameField,
} from '../../src/schemas/ingest';
import { plantOf, run, SINCE } from '../plant/support';
import { UNPOWERED } from '../plant/string-plant';
import { Outbox } from './outbox';
import { frameOf, inputRows, inverterRows, radioOf, weatherRows } from './readings';
import { RollCall } from './roll-call';

const hour = 3600;

describe('what a logger says', () => {
  it.each([
    ['Weirside Clinic', 0],
    ['Weirside Clinic', -6.5 * hour],
    ['Slate Lane Library', 2 * hour],
    ['Quayside Cold Store', 0],
    ['Coopers Wharf Gallery', 4 * hour],
  ])('%s at %i s: fits the protocol and its ranges', (name, offset) => {
    const plant = plantOf(name, SINCE + offset);
    const logger = plant.plan.loggers[0]?.serial ?? '';
    const radio = radioOf(plant, logger);
    for (const message of [
      { type: 'inputs', seq: 1, rows: inputRows(plant, logger) },
      { type: 'inverters', seq: 2, rows: inverterRows(plant, logger) },
      { type: 'weather', seq: 3, rows: weatherRows(plant, logger) },
    ])
      expect(loggerMessage.safeParse(message).error).toBeUndefined();
    const frames = plant.plan.strings.flatMap((s) => {
      const f = frameOf(
        plant,
        radio,
        s.slots.map((slot) => slot.serial),
      );
      return f ? [{ f, s }] : [];
    });
    const outside = frames.flatMap(({ f, s }) =>
      (Object.entries(f) as [FrameField, (number | null)[]][]).flatMap(([field, values]) => {
        const [low, high] = FRAME_RANGES[field];
        const wrong = values.filter((v) => v !== null && !(Number.isInteger(v) && v >= low && v <= high));
        return wrong.length > 0 || values.length !== s.slots.length ? [{ string: s.name, field, wrong }] : [];
      }),
    );
    expect(outside).toEqual([]);
    if (frames.length > 0)
      expect(
        framesEnvelope.safeParse({
          type: 'frames',
          seq: 4,
          roster: 1,
          at: frames.map(() => plant.atS),
          string: frames.map(({ s }) => s.rosterIndex),
          frames: frames.map(({ f }) => f),
        }).error,
      ).toBeUndefined();
  });

  it('carries the sides that the type measures, power where it optimizes, and nothing of shutdown-only units', () => {
    const fieldsOf = (name: string) => {
      const plant = plantOf(name);
      const radio = radioOf(plant, plant.plan.loggers[0]?.serial ?? '');
      const f: Frame | null = frameOf(
        plant,
        radio,
        plant.plan.strings[0]!.slots.map((s) => s.serial),
      );
      return f && Object.keys(f).sort();
    };
    const always = ['current', 'signal', 'state', 'temperature', 'via'];
    expect(fieldsOf('Kestrel Row School')).toEqual([...always, 'voltageOut'].sort());
    expect(fieldsOf('Weirside Clinic')).toEqual([...always, 'voltageIn', 'voltageOut'].sort());
    expect(fieldsOf('Slate Lane Library')).toEqual([...always, 'powerOut', 'voltageIn', 'voltageOut'].sort());
    expect(fieldsOf('Coopers Wharf Gallery')).toBeNull();
  });

  it('is silent for an empty slot and a serial that is not there', () => {
    const plant = plantOf('Weirside Clinic');
    const radio = radioOf(plant, plant.plan.loggers[0]?.serial ?? '');
    const serials = plant.plan.strings[0]!.slots.map((s) => s.serial);
    const f = frameOf(plant, radio, [null, 'NOBODY-HERE', ...serials.slice(2)]);
    expect(f?.state.slice(0, 2)).toEqual([null, null]);
    expect(f?.state.slice(2).filter((s) => s === 1).length).toBeGreaterThan(7);
  });
});

describe('a roll call', () => {
  const listen = (pace: number, seconds: number) => {
    const plant = plantOf('Old Tannery Market Hall');
    const rollCall = new RollCall(plant, plant.plan.loggers[0]?.serial ?? '', pace);
    rollCall.listen(true, plant.atS);
    const curve: number[] = [];
    let heard = 0;
    const rows = [];
    for (let i = 0; i < seconds; i++) {
      run(plant, 1);
      const answers = rollCall.answers(plant.atS);
      rows.push(...answers);
      heard += answers.length;
      curve.push(heard);
    }
    return { plant, rollCall, curve, rows };
  };

  it('takes minutes in life and leaves stragglers', () => {
    const { curve, rows } = listen(1, 900);
    expect(curve[30]).toBeLessThan(40);
    expect(curve[299]).toBeGreaterThan(90);
    expect(curve[899]).toBeGreaterThan(150);
    expect(curve[899]).toBeLessThan(186);
    expect(loggerMessage.safeParse({ type: 'heard', seq: 1, rows }).error).toBeUndefined();
    expect(new Set(rows.map((r) => r.serial)).size).toBe(rows.length);
  });

  it('stops when it is told to, and goes on with those that are left', () => {
    const { plant, rollCall, curve } = listen(20, 10);
    rollCall.listen(false, plant.atS);
    run(plant, 30);
    expect(rollCall.answers(plant.atS)).toEqual([]);
    rollCall.listen(true, plant.atS);
    run(plant, 200);
    const later = rollCall.answers(plant.atS);
    expect(curve.at(-1)! + later.filter((r) => plant.seatOf(r.serial)).length).toBeGreaterThanOrEqual(170);
  });

  it('hears nobody at night', () => {
    const plant = plantOf('Old Tannery Market Hall', SINCE + 12 * hour);
    expect(plant.strings.every((s) => s.mode.every((m) => m === UNPOWERED))).toBe(true);
    const rollCall = new RollCall(plant, plant.plan.loggers[0]?.serial ?? '', 1000);
    rollCall.listen(true, plant.atS);
    run(plant, 60);
    expect(rollCall.answers(plant.atS).filter((r) => plant.seatOf(r.serial))).toEqual([]);
  });
});

describe('the outbox', () => {
  const weather = (at: number) =>
    ({
      type: 'weather',
      rows: [{ at, sensor: 0, irradiance: 1, temperatureAir: 1, temperatureModule: 1, windSpeed: 1 }],
    }) as const;

  it('keeps a message until it is acknowledged, and sends it again after a broken line, in order', () => {
    const outbox = new Outbox();
    for (let i = 0; i < 5; i++) outbox.push({ ...weather(i), rows: [...weather(i).rows] });
    expect(outbox.take().map((m) => m.seq)).toEqual([1, 2, 3, 4, 5]);
    expect(outbox.take()).toEqual([]);
    outbox.acknowledge(2);
    outbox.rewind();
    expect(outbox.take().map((m) => m.seq)).toEqual([1, 3, 4, 5]);
    for (const seq of [1, 3, 4, 5]) outbox.acknowledge(seq);
    expect(outbox.size).toBe(0);
  });

  it('drops what is refused for good, and tries again what may be taken later', () => {
    const outbox = new Outbox();
    outbox.push({ ...weather(1), rows: [...weather(1).rows] });
    outbox.push({ ...weather(2), rows: [...weather(2).rows] });
    outbox.take();
    outbox.refuse(1, 'rows', 'no', false);
    outbox.refuse(2, 'rows', 'busy', true);
    expect(outbox.take().map((m) => m.seq)).toEqual([2]);
    expect(outbox.dropped).toBe(1);
    expect(outbox.lastRefusal).toEqual({ field: 'rows', reason: 'busy' });
  });

  it('has only so many on the way', () => {
    const outbox = new Outbox();
    for (let i = 0; i < 100; i++) outbox.push({ ...weather(i), rows: [...weather(i).rows] });
    const first = outbox.take().length;
    expect(first).toBeLessThan(100);
    outbox.acknowledge(1);
    expect(outbox.take().length).toBe(1);
  });
});
