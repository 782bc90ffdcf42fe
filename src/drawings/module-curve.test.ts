import { describe, expect, it } from 'vitest';
import { moduleSheetOf } from '../domain/equipment/module-fields';
import { starterEquipment } from '../domain/equipment/starter';
import { moduleFromDatasheet } from '../domain/photovoltaics/module/datasheet';
import { CONDITIONS, moduleLine, sheetPoints } from './module-curve';

const SHEET = moduleSheetOf(starterEquipment().modules[0] ?? {});
const { parameters } = moduleFromDatasheet(SHEET);

describe('a module’s curve', () => {
  const stc = moduleLine(parameters, { poaGlobal: 1000, temperatureCell: 25 });

  it('runs from short circuit to open circuit through the datasheet’s points', () => {
    const first = stc.points[0];
    const last = stc.points.at(-1);
    expect(first?.voltage).toBeCloseTo(0, 6);
    expect(first?.current).toBeCloseTo(SHEET.iscRef, 6);
    expect(last?.voltage).toBeCloseTo(SHEET.vocRef, 6);
    expect(last?.current).toBe(0);
    for (const mark of sheetPoints(SHEET)) {
      // the nearest drawn point is no further than a line's width on a drawing 560 px wide
      const gap = Math.min(
        ...stc.points.map((p) =>
          Math.hypot((p.voltage - mark.voltage) / SHEET.vocRef, (p.current - mark.current) / SHEET.iscRef),
        ),
      );
      expect(gap, mark.label).toBeLessThan(0.03);
    }
  });

  it('falls: more voltage, less current', () => {
    for (const line of [...CONDITIONS.light, ...CONDITIONS.temperature].map((c) => moduleLine(parameters, c)))
      for (const [i, p] of line.points.entries()) {
        const next = line.points[i + 1];
        if (next) {
          expect(next.voltage).toBeGreaterThan(p.voltage);
          expect(next.current).toBeLessThan(p.current);
        }
      }
  });

  it('less light gives less power, warmer cells less voltage', () => {
    const power = CONDITIONS.light.map((c) => moduleLine(parameters, c).pmp);
    expect(power).toEqual([...power].sort((a, b) => b - a));
    expect(power[0]).toBeCloseTo(SHEET.vmpRef * SHEET.impRef, 0);
    const voltage = CONDITIONS.temperature.map((c) => moduleLine(parameters, c).vmp);
    expect(voltage).toEqual([...voltage].sort((a, b) => b - a));
  });
});
