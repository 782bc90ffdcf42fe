import { describe, expect, it } from 'vitest';
import type { ModuleType } from '../equipment/module-type';
import { expectedBand, expectedModule, moduleVoltage, type ExpectedInput } from './expected';
import { expectedHistory } from './expected-history';

const module: ModuleType = {
  name: 'Mono 450',
  vocRef: 49.3,
  iscRef: 11.6,
  vmpRef: 41.5,
  impRef: 10.85,
  betaVoc: -0.0027,
  alphaIsc: 0.0005,
  gammaPmp: -0.0034,
  cellsInSeries: 72,
  bypassGroups: 3,
  noct: 45,
};
const input = (more: Partial<ExpectedInput> = {}): ExpectedInput => ({
  module,
  underLoad: true,
  otherStrings: [],
  ownUnits: [],
  poaMeasured: null,
  poaClear: 800,
  temperatureCellMeasured: null,
  temperatureAir: null,
  ...more,
});

describe('what a passing unit should give', () => {
  it('comes from the most direct source there is', () => {
    const all = { otherStrings: [38.8, 39, 39.1, 39.2, 38.9], ownUnits: [37, 37.5, 38], poaMeasured: 700 };
    expect(expectedModule(input(all))).toMatchObject({ from: 'other_strings', voltage: 39 });
    expect(expectedModule(input({ ...all, otherStrings: [] }))).toMatchObject({
      from: 'own_units',
      voltage: 37.5,
    });
    expect(expectedModule(input({ poaMeasured: 700 }))?.from).toBe('sensor');
    expect(expectedModule(input())?.from).toBe('clear_sky');
  });

  it('has a spread from five siblings on, and a fixed wide one below', () => {
    expect(expectedModule(input({ otherStrings: [39, 39, 39, 39] }))?.relativeSd).toBe(0.03);
    const wild = expectedModule(input({ otherStrings: [37, 38, 39, 40, 41] }));
    expect(wild?.relativeSd).toBeCloseTo(1.4826 / 39, 6);
    // equal siblings don't make it sure: meters have an accuracy
    expect(expectedModule(input({ otherStrings: [39, 39, 39, 39, 39] }))?.relativeSd).toBe(0.012);
  });

  it('is not moved by one sibling that is held', () => {
    expect(expectedModule(input({ otherStrings: [39, 39.1, 0.6, 38.9, 39.2] }))?.voltage).toBe(39);
  });

  it('can not be told in the dark, whatever the sky should be', () => {
    expect(expectedModule(input({ poaMeasured: 4 }))).toBeNull();
    expect(expectedModule(input({ poaClear: 0 }))).toBeNull();
  });

  it('is the datasheet’s own at standard test conditions', () => {
    const stc = { module, temperatureCellMeasured: 25, temperatureAir: null };
    expect(moduleVoltage({ ...stc, underLoad: false }, 1000)).toBeCloseTo(49.3, 6);
    expect(moduleVoltage({ ...stc, underLoad: true }, 1000)).toBeCloseTo(41.5, 6);
    expect(moduleVoltage({ ...stc, underLoad: false, temperatureCellMeasured: 45 }, 1000)).toBeCloseTo(
      49.3 * (1 - 0.0027 * 20),
      1,
    );
  });

  it('gives a band that holds nine in ten', () => {
    const [low, high] = expectedBand({ voltage: 39, relativeSd: 0.02 }, 14);
    expect(low).toBeCloseTo(546 * (1 - 0.0329), 6);
    expect(high).toBeCloseTo(546 * (1 + 0.0329), 6);
  });
});

describe('the expectation over time', () => {
  const grid = [0, 300, 600, 900, 1200];
  const step = (at: number, typical: number, strings = 8) => ({
    at,
    typical,
    low: typical - 0.1,
    high: typical + 0.1,
    strings,
  });
  const middle = (h: ReturnType<typeof expectedHistory>) =>
    h.low.map((low, i) => (low === null ? null : (low + (h.high[i] ?? 0)) / 2));

  it('follows the siblings and, where they say nothing, the model brought to their level', () => {
    const h = expectedHistory({
      grid,
      siblings: [step(0, 36), step(300, 36), step(600, 36)],
      model: () => 40,
      units: 10,
      bareModel: true,
    });
    expect(middle(h).map((v) => v && Math.round(v))).toEqual([360, 360, 360, 360, 360]);
    expect(h.from).toBe('siblings_and_model');
    // the model's part is shown wider
    expect((h.high[4] ?? 0) - (h.low[4] ?? 0)).toBeGreaterThan((h.high[0] ?? 0) - (h.low[0] ?? 0));
  });

  it('shows the bare model only when asked to', () => {
    const given = { grid, siblings: [], model: () => 40, units: 10 };
    expect(expectedHistory({ ...given, bareModel: true }).from).toBe('model');
    const none = expectedHistory({ ...given, bareModel: false });
    expect(none.from).toBe('nothing');
    expect(none.low.every((v) => v === null)).toBe(true);
  });

  it('expects nothing where the model has no light', () => {
    const h = expectedHistory({
      grid,
      siblings: [],
      model: (at) => (at < 600 ? null : 40),
      units: 10,
      bareModel: true,
    });
    expect(h.low.slice(0, 2)).toEqual([null, null]);
    expect(h.low[2]).not.toBeNull();
  });
});
