import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, it } from 'vitest';
import { Walk, type WalkedString } from './Walk';
import { focusOn, rowsOf, sheetOf, spanOf } from './walk-geometry';

const string = (name: string, verdicts: ('ok' | 'stuck')[], y: number): WalkedString => ({
  name,
  slots: verdicts.map((verdict, i) => ({
    position: i + 1,
    serial: `U-${i + 1}`,
    state: verdict === 'stuck' ? 'shutdown' : 'passing',
    verdict,
    voltage: 30,
    voltageIn: null,
    assumed: false,
    expected: 30,
    roofX: 2 * i,
    roofY: y,
  })),
});
const outline = [
  [0, 0],
  [40, 0],
  [40, 20],
  [0, 20],
] as const;

describe('where things of a walk lie on paper', () => {
  it('north is up and the margin is kept', () => {
    const sheet = sheetOf({ west: 0, east: 10, south: 0, north: 5 }, 120, 10);
    expect(sheet.at({ x: 0, y: 5 })).toEqual({ x: 10, y: 10 });
    expect(sheet.at({ x: 10, y: 0 })).toEqual({ x: 110, y: 60 });
    expect(sheet.height).toBe(70);
  });
  it('draws closer where the walk is a small part of the roof, and never past it', () => {
    const whole = { west: 0, east: 100, south: 0, north: 50 };
    const near = focusOn(whole, { west: 1, east: 3, south: 1, north: 1 });
    expect(near).toEqual({ west: 0, east: 8, south: 0, north: 4 });
    expect(focusOn(whole, { west: 5, east: 95, south: 0, north: 50 })).toBe(whole);
    expect(focusOn(whole, null)).toBe(whole);
    expect(spanOf([])).toBeNull();
  });
  it('a step across the roof is a lead, not a row', () => {
    const { rows, leads } = rowsOf([
      { x: 0, y: 0 },
      { x: 1, y: 0 },
      { x: 2, y: 0 },
      { x: -9, y: 2 },
      { x: -8, y: 2 },
    ]);
    expect(rows.map((r) => r.length)).toEqual([3, 2]);
    expect(leads).toEqual([
      [
        { x: 2, y: 0 },
        { x: -9, y: 2 },
      ],
    ]);
  });
});

describe('the walk', () => {
  const strings = [string('B3', ['ok', 'stuck', 'ok'], 4), string('B1', ['ok', 'stuck', 'ok'], 8)];
  it('marks the exceptions of the strings that are walked, and says them', () => {
    const html = renderToStaticMarkup(<Walk outline={outline} strings={strings} walked={new Set(['B3'])} />);
    expect(html).toContain('Roof with the path of B3. B3: 2 stuck');
    expect(html.match(/<rect[^>]*fill="var\(--rust\)"/g)).toHaveLength(1);
    expect(html).not.toContain('B1 −');
  });
  it('marks only the stops it is told of', () => {
    const none = renderToStaticMarkup(
      <Walk outline={outline} strings={strings} walked={new Set(['B3'])} marked={new Set(['B3-1'])} />,
    );
    expect(none).not.toContain('fill="var(--rust)"');
    expect(none).toContain('>1</text>');
  });
  it('draws nothing where nothing has a place', () => {
    const nowhere = strings.map((s) => ({
      ...s,
      slots: s.slots.map((slot) => ({ ...slot, roofX: null, roofY: null })),
    }));
    expect(renderToStaticMarkup(<Walk outline={[]} strings={nowhere} walked={new Set()} />)).toBe('');
  });
});
