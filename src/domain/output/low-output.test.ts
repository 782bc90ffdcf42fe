import { describe, expect, it } from 'vitest';
import { judgeOutput } from './low-output';
import { planeReference, type PlaneSeries } from './plane-reference';
import { generator, samplePlane, type PlaneFault } from './sample-plane';

const judge = (plane: PlaneSeries, index: number, more = {}) =>
  judgeOutput(plane, planeReference(plane), index, more);
const oneFault = (fault: PlaneFault, more = {}): PlaneSeries =>
  samplePlane(generator(5), { strings: 12, days: 8, faults: new Map([[4, fault]]), ...more });

describe('a string among its siblings', () => {
  it('with two units missing: found, counted, and the loss is about two of its modules', () => {
    const plane = oneFault({ kind: 'units_missing', count: 2 });
    const finding = judge(plane, 4, { pricePerKWh: 0.2 });
    expect(finding).toMatchObject({ outcome: 'low', method: 'siblings' });
    expect(finding.signature).toMatchObject({ kind: 'units_missing', count: 2 });
    const share = 2 / plane.strings[4]!.units;
    expect(finding.loss!.low).toBeLessThan(share * 1.05);
    expect(finding.loss!.high).toBeGreaterThan(share);
    expect(finding.lossMoney!.value).toBeCloseTo(finding.lossKWh!.value * 0.2, 9);
    expect(finding.threshold.source).toContain('Iglewicz');
  });
  it('with shade in the afternoon: the sun positions are named', () => {
    const finding = judge(oneFault({ kind: 'shade', from: 220, to: 260, depth: 0.7 }), 4);
    expect(finding.signature).toMatchObject({ kind: 'shade' });
    const [from, to] = finding.signature!.figures.shadeAzimuth!;
    expect(from).toBeGreaterThanOrEqual(200);
    expect(to).toBeLessThanOrEqual(270);
  });
  it('with low current and right voltage', () => {
    expect(judge(oneFault({ kind: 'current_low', share: 0.12 }), 4).signature!.kind).toBe('current_low');
  });
  it('on a shared input says nothing of voltage', () => {
    const finding = judge(oneFault({ kind: 'current_low', share: 0.15 }, { shared: true }), 4);
    expect(finding.outcome).toBe('low');
    expect(finding.signature!.figures.voltageRatio).toBeNull();
    expect(finding.signature!.couldBe.join()).toContain('disconnected');
  });
  it('is low on a day of much scatter too, by the spread of all days', () => {
    const plane = oneFault({ kind: 'units_missing', count: 2 });
    const reference = planeReference(plane);
    reference.z[4]!.fill(-2.8);
    expect(judgeOutput(plane, reference, 4).outcome).toBe('low');
    // but not where the strings differ so much every day, nor where that day has worse
    expect(judgeOutput(plane, { ...reference, spread: 0.06 }, 4).outcome).toBe('as_expected');
    reference.z[4]!.fill(-1.5);
    expect(judgeOutput(plane, reference, 4).outcome).toBe('as_expected');
  });
  it('is not blamed for curtailed afternoons and counts what it left out', () => {
    const finding = judge(oneFault({ kind: 'none' }, { curtailed: true }), 4);
    expect(finding.outcome).toBe('as_expected');
    expect(finding.excluded.curtailed).toBeGreaterThan(30);
  });
  it("can't tell from two days", () => {
    const plane = samplePlane(generator(3), { strings: 8, days: 2, faults: new Map() });
    expect(judge(plane, 0).outcome).toBe('cant_tell');
  });
});

describe('a lone string', () => {
  it('is held against the model with a wide band', () => {
    const plane = samplePlane(generator(9), {
      strings: 2,
      days: 8,
      faults: new Map([[1, { kind: 'units_missing', count: 4 }]]),
    });
    expect(judge(plane, 0)).toMatchObject({ outcome: 'as_expected', method: 'model' });
    expect(judge(plane, 1)).toMatchObject({ outcome: 'low', method: 'model' });
  });
});

describe('over many plane-days', () => {
  it('finds losses of 8 % and more, leaves sound strings alone and names what they look like', () => {
    const random = generator(77);
    let losses = 0;
    let found = 0;
    let healthyDays = 0;
    let falseAlarms = 0;
    let told = 0;
    let toldRight = 0;
    for (let k = 0; k < 60; k++) {
      const faults = new Map<number, PlaneFault>();
      const pick = random();
      const kind: PlaneFault =
        pick < 0.35
          ? { kind: 'units_missing', count: 1 + Math.floor(2 * random()) }
          : pick < 0.6
            ? { kind: 'current_low', share: 0.08 + 0.1 * random() }
            : pick < 0.8
              ? { kind: 'shade', from: 130, to: 185, depth: 0.45 }
              : { kind: 'none' };
      if (kind.kind !== 'none') faults.set(2, kind);
      const plane = samplePlane(random, {
        strings: 8 + Math.floor(10 * random()),
        days: 7,
        faults,
        gaps: 0.03,
      });
      const reference = planeReference(plane);
      plane.strings.forEach((s, i) => {
        const finding = judgeOutput(plane, reference, i);
        if (i === 2 && kind.kind !== 'none') {
          const loss = kind.kind === 'units_missing' ? kind.count / s.units : 0.08;
          if (finding.outcome === 'cant_tell' || loss < 0.08) return;
          losses++;
          if (finding.outcome === 'low') {
            found++;
            told++;
            if (finding.signature!.kind === kind.kind) toldRight++;
          }
        } else {
          healthyDays += plane.days;
          if (finding.outcome === 'low') falseAlarms++;
        }
      });
    }
    expect(losses).toBeGreaterThan(30);
    expect(found / losses).toBeGreaterThanOrEqual(0.9);
    expect((1000 * falseAlarms) / healthyDays).toBeLessThan(1);
    expect(toldRight / told).toBeGreaterThanOrEqual(0.9);
  }, 30_000);
});
