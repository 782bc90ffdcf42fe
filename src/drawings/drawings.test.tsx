import fc from 'fast-check';
import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, it } from 'vitest';
import { Comb } from './Comb';
import { combGeometry, pitchFor } from './comb-geometry';
import { rise, type DrawnSlot } from './condition';
import { pieces } from './DayCurve';
import { mixParts, mixWidths, type Mix } from './mix';
import { MixBar } from './MixBar';
import { RollCallCurve } from './RollCallCurve';
import { Staircase } from './Staircase';
import { passingByTotal, staircaseGeometry } from './staircase-geometry';
import { ticksTo } from './ticks';

const slot = (position: number, more: Partial<DrawnSlot> = {}): DrawnSlot => ({
  position,
  serial: `S${position}`,
  state: 'passing',
  verdict: 'ok',
  voltage: 39,
  voltageIn: null,
  assumed: false,
  expected: 39,
  ...more,
});
const string = (n: number, change: Record<number, Partial<DrawnSlot>> = {}) =>
  Array.from({ length: n }, (_, i) => slot(i + 1, change[i + 1]));
const held: Partial<DrawnSlot> = { state: 'shutdown', verdict: 'stuck', voltage: -0.5 };

describe('what a slot adds to its string', () => {
  it.each<[string, Partial<DrawnSlot>, number | null]>([
    ['a passing unit its output', {}, 39],
    ['a unit in shutdown what it lets through', held, -0.5],
    ['an empty slot nothing', { serial: null }, 0],
    ['a silent unit nobody knows', { state: 'silent' }, null],
    ['an unheard unit nobody knows', { state: 'unheard', voltage: null }, null],
    ['a dark unit nothing, whatever it said at noon', { state: 'dark' }, 0],
    ['a passing claim the module’s voltage', { voltage: null, voltageIn: 38, assumed: true }, 38],
    ['a shutdown claim nothing', { state: 'shutdown', voltage: null, voltageIn: 48, assumed: true }, 0],
    ['a unit that tells nothing nobody knows', { state: null, voltage: null }, null],
  ])('%s', (_, more, volts) => expect(rise(slot(1, more))).toBe(volts));
});

describe('the staircase', () => {
  const draw = (slots: DrawnSlot[], voltage: number | null = null) =>
    staircaseGeometry({ slots, voltage, expectedVoltage: slots.length * 39 }, 880, 330);

  it('rises by each passing unit and stays flat at those held', () => {
    const g = draw(string(14, { 5: held, 9: held }));
    const flat = g.steps.filter((s) => Math.abs(s.yFrom - s.yTo) < 1).map((s) => s.position);
    expect(flat).toEqual([5, 9]);
    expect(g.runs.map((r) => [r.condition, r.from, r.to])).toEqual([
      ['stuck', 5, 5],
      ['stuck', 9, 9],
    ]);
    expect(g.gap?.volts).toBeCloseTo(79, 6);
  });

  it('does not call missing what silent and unheard units may give', () => {
    expect(
      draw(string(14, { 2: { state: 'silent' }, 3: { state: 'unheard', voltage: null } })).gap,
    ).toBeNull();
  });

  it('marks no gap for a shutdown on purpose, nor for the night', () => {
    const down = string(14).map((s) => ({ ...s, state: 'shutdown' as const, voltage: 0.6 }));
    expect(draw(down).gap).toBeNull();
    expect(draw(string(14).map((s) => ({ ...s, state: 'dark' as const, voltage: null }))).gap).toBeNull();
  });

  it('stays within its plot for any voltages', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.record({
            voltage: fc.double({ min: -20, max: 80, noNaN: true }),
            expected: fc.double({ min: 0, max: 60, noNaN: true }),
          }),
          {
            minLength: 1,
            maxLength: 63,
          },
        ),
        (values) => {
          const g = draw(values.map((v, i) => slot(i + 1, v)));
          for (const s of g.steps)
            for (const y of [s.yFrom, s.yTo]) {
              expect(y).toBeGreaterThanOrEqual(g.plot.top - 1e-6);
              expect(y).toBeLessThanOrEqual(g.plot.bottom + 1e-6);
            }
        },
      ),
    );
  });

  it('shows one total, k of n and no positions where units tell nothing', () => {
    const told = string(14).map((s) => ({ ...s, state: null, verdict: null, voltage: null }));
    const html = renderToStaticMarkup(<Staircase id="s" slots={told} voltage={468} expectedVoltage={546} />);
    expect(html).toContain('12 of 14 pass by the total, positions unknown');
    expect(passingByTotal(8.4, 546, 14)).toBe(0);
    expect(passingByTotal(468, null, 14)).toBeNull();
  });

  it('says in words what it shows, and draws assumed outputs dashed', () => {
    const slots = string(14, { 5: held, 9: held, 7: { voltage: null, voltageIn: 38, assumed: true } });
    const html = renderToStaticMarkup(<Staircase id="s" slots={slots} voltage={466} expectedVoltage={546} />);
    expect(html).toContain('Positions 5 and 9: stuck.');
    expect(html.match(/stroke-dasharray="5 3"/g)).toHaveLength(1);
    expect(html).not.toContain('NaN');
  });

  it.each([1, 2, 14, 40, 63])('labels of %i positions do not touch at 360 px', (n) => {
    const g = staircaseGeometry(
      { slots: string(n, { 5: held, 6: held }), voltage: null, expectedVoltage: null },
      360,
      260,
    );
    const at = g.steps.filter((s) => g.labels.has(s.position)).map((s) => s.x + s.width / 2);
    at.slice(1).forEach((x, i) => expect(x - (at[i] ?? 0)).toBeGreaterThanOrEqual(17.9));
  });
});

describe('the comb', () => {
  it('of 60 units fits a phone with bars of 2 px', () => {
    const g = combGeometry(string(60), 250, 22);
    expect(g.width).toBeLessThanOrEqual(250);
    expect(Math.min(...g.teeth.map((t) => t.width))).toBeGreaterThanOrEqual(2);
    expect(pitchFor(63, 100)).toBe(3);
  });

  it('tells every state by something else than colour', () => {
    const states: Partial<DrawnSlot>[] = [
      {},
      held,
      { state: 'shutdown', voltage: 0.6 },
      { state: 'silent' },
      { state: 'unheard', voltage: null },
      { state: 'dark' },
      { verdict: 'not_shutting_down' },
      { serial: null },
      { state: null, voltage: null },
    ];
    const shapes = states.map((more) =>
      renderToStaticMarkup(<Comb id="c" slots={[slot(1, more)]} width={18} />)
        .replace(/aria-label="[^"]*"/, '')
        .replace(/var\(--[a-z-]+\)/g, 'ink'),
    );
    expect(new Set(shapes).size).toBe(states.length);
  });

  it('names the exceptions', () => {
    const html = renderToStaticMarkup(<Comb id="c" slots={string(14, { 5: held, 9: held })} />);
    expect(html).toContain('14 positions: 12 passing; 5 and 9 stuck.');
  });
});

describe('the mix of a site', () => {
  const count = fc.integer({ min: 0, max: 2000 });
  it('draws every unit once, nothing under 2 px, within its width', () => {
    fc.assert(
      fc.property(
        count,
        count,
        count,
        count,
        count,
        count,
        (passing, shutdown, unheard, silent, dark, untold) => {
          const mix: Mix = {
            units: passing + shutdown + unheard + silent + dark + untold,
            passing,
            shutdown,
            unheard,
            silent,
            dark,
            stuck: Math.min(2, shutdown),
            notShuttingDown: Math.min(1, passing),
          };
          const parts = mixParts(mix);
          expect(parts.reduce((sum, p) => sum + p.units, 0)).toBe(mix.units);
          const widths = mixWidths(parts, 190);
          if (parts.length === 0) return;
          expect(widths.reduce((a, b) => a + b, 0) + parts.length - 1).toBeCloseTo(190, 6);
          expect(Math.min(...widths)).toBeGreaterThanOrEqual(1.99);
        },
      ),
    );
  });

  it('says its numbers', () => {
    const html = renderToStaticMarkup(
      <MixBar
        id="m"
        counts={{
          units: 312,
          passing: 312,
          shutdown: 0,
          unheard: 0,
          silent: 0,
          dark: 0,
          stuck: 0,
          notShuttingDown: 2,
        }}
      />,
    );
    expect(html).toContain('312 units: 2 not shutting down, 310 passing');
  });
});

describe('curves', () => {
  it('break where nothing is known', () => {
    const points = [1, 2, null, 4, null, null, 7].map((value, i) => ({ value, i }));
    expect(pieces(points).map((piece) => piece.map((p) => p.value))).toEqual([[1, 2], [4], [7]]);
  });

  it('of a roll call step once for each unit heard', () => {
    const html = renderToStaticMarkup(
      <RollCallCurve total={4} heardAtS={[10, 20, 30]} nowS={60} forecast={[]} />,
    );
    expect(html).toContain('3 of 4 units heard after 1 minutes');
    expect(html.match(/d="M[^"]*"[^>]*stroke-width="2.5"/)?.[0].match(/V/g)).toHaveLength(3);
  });

  it('have round ticks that reach the top', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 1e6, noNaN: true }), (max) => {
        const ticks = ticksTo(max);
        expect(ticks[0]).toBe(0);
        expect(ticks.at(-1)).toBeGreaterThanOrEqual(max * (1 - 1e-6));
        expect(ticks.length).toBeLessThanOrEqual(8);
      }),
    );
  });
});
