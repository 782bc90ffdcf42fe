import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { UnitState, Verdict } from '../verdicts/codes';
import { causesOf } from './causes';
import { NOW, siteOf, stringOf, withUnits } from './sample-site';
import type { StringCondition } from './site';

const parts = (strings: StringCondition[], more = {}): string[] =>
  causesOf(siteOf(strings, more)).map(
    (c) => `${c.verdict} ${c.sharedPart?.kind} ${c.sharedPart?.name} ${c.units.length}`,
  );

describe('units stuck in shutdown', () => {
  it('one of many stands alone and is named by its place', () => {
    const [cause, ...others] = causesOf(siteOf([withUnits(stringOf('A1', 12), [7], 'shutdown', 'stuck')]));
    expect(others).toEqual([]);
    expect(cause).toMatchObject({
      headline: 'Unit 7 of A1 is stuck in shutdown',
      sharedPart: { kind: 'unit', name: 'A1-7' },
      units: [{ position: 7, serial: 'A1-7' }],
    });
    expect(cause!.alternatives.length).toBeGreaterThan(1);
  });
  it('two strings of one transmitter: the transmitter, with its rivals named', () => {
    const [cause, ...others] = causesOf(
      siteOf([
        withUnits(stringOf('A1', 10), 'all', 'shutdown', 'stuck'),
        withUnits(stringOf('A2', 10), 'all', 'shutdown', 'stuck'),
        stringOf('B1', 10, { transmitters: ['T2'] }),
      ]),
    );
    expect(others).toEqual([]);
    expect(cause).toMatchObject({
      headline: 'Transmitter T1 is not heard by 20 units',
      sharedPart: { kind: 'transmitter', name: 'T1' },
    });
    expect(cause!.evidence).toContain('20 of 20 units');
  });
  it('one string of a transmitter whose other string is well: that string, not the transmitter', () => {
    expect(parts([withUnits(stringOf('A1', 10), 'all', 'shutdown', 'stuck'), stringOf('A2', 10)])).toEqual([
      'stuck string A1 10',
    ]);
  });
  it('half of a string, scattered: a weak signal on it, and single units stay possible', () => {
    const [cause] = causesOf(
      siteOf([withUnits(stringOf('A1', 14), [1, 3, 4, 8, 9, 13, 14], 'shutdown', 'stuck')]),
    );
    expect(cause).toMatchObject({
      headline: 'The keep-alive is too weak for 7 units of A1',
      sharedPart: { kind: 'string', name: 'A1' },
    });
  });
  it('two of one string stay two', () => {
    expect(parts([withUnits(stringOf('A1', 14), [5, 11], 'shutdown', 'stuck')])).toHaveLength(2);
  });
  it('units that the logger releases share their gateway', () => {
    const byGateway = (s: StringCondition): StringCondition => ({
      ...s,
      releasedBy: 'logger',
      slots: s.slots.map((x) => ({ ...x, gateway: x.position > 6 ? 'G2' : 'G1' })),
    });
    expect(
      parts([
        withUnits(byGateway(stringOf('A1', 10)), [7, 8, 9, 10], 'shutdown', 'stuck'),
        withUnits(byGateway(stringOf('A2', 10)), [7, 8, 9, 10], 'shutdown', 'stuck'),
      ]),
    ).toEqual(['stuck gateway G2 8']);
  });
  it('strings that tell nothing are counted by their voltage', () => {
    const [cause] = causesOf(
      siteOf([
        stringOf('C1', 12, {
          kind: 'shutdown_only',
          finding: {
            kind: 'stuck_positions_unknown',
            sinceS: NOW - 600,
            evidence: {
              scope: 'string',
              measuredV: 399,
              expectedV: 480,
              thresholdV: 450,
              thresholdSource: 'six tenths of a module',
              units: 2,
              unitsRange: [2, 2],
              ofN: 12,
              atS: NOW,
              confidence: 0.85,
              couldBe: ['units left unplugged'],
            },
          },
        }),
      ]),
    );
    expect(cause).toMatchObject({
      headline: '2 of 12 units of C1 are stuck in shutdown',
      units: [{ position: null }],
    });
    expect(cause!.evidence).toContain('399.0 V, 480.0 V expected');
    expect(cause!.alternatives).toContain('units left unplugged');
  });
});

describe('units that do not shut down', () => {
  const pressed = {
    zones: [
      { name: 'Z1', inForce: 'initiator' as const },
      { name: 'Z2', inForce: 'released' as const },
    ],
    transmitters: [
      { name: 'T1', zone: 'Z1', inForce: null },
      { name: 'T9', zone: 'Z2', inForce: 'released' as const },
    ],
  };
  const down = (s: StringCondition): StringCondition => withUnits(s, 'all', 'shutdown', 'ok');
  it('a whole string beside a transmitter that still sends: cross-talk, its own transmitter kept as a rival', () => {
    const [cause, ...others] = causesOf(
      siteOf(
        [withUnits(stringOf('A1', 10), 'all', 'passing', 'not_shutting_down'), down(stringOf('A2', 10))],
        pressed,
      ),
    );
    expect(others).toEqual([]);
    expect(cause).toMatchObject({
      verdict: 'not_shutting_down',
      sharedPart: { kind: 'transmitter', name: 'T9' },
    });
    expect(cause!.headline).toContain('seem to hear transmitter T9');
  });
  it('all strings of one transmitter with no other sender about', () => {
    const [cause] = causesOf(
      siteOf(
        [
          withUnits(stringOf('A1', 10), 'all', 'passing', 'not_shutting_down'),
          withUnits(stringOf('A2', 10), 'all', 'passing', 'not_shutting_down'),
          down(stringOf('B1', 10, { transmitters: ['T2'] })),
        ],
        {
          zones: [{ name: 'Z1', inForce: 'initiator' as const }],
          transmitters: [{ name: 'T1', zone: 'Z1', inForce: null }],
        },
      ),
    );
    expect(cause).toMatchObject({ sharedPart: { kind: 'transmitter', name: 'T1' } });
  });
  it('two of them stay two when the others have gone dark: they are not all of what they share', () => {
    const dusk = withUnits(stringOf('A1', 14), 'all', 'dark', 'unconfirmed');
    const two = withUnits(dusk, [3, 11], 'passing', 'not_shutting_down');
    const other = withUnits(stringOf('A2', 14), 'all', 'dark', 'unconfirmed');
    const found = causesOf(
      siteOf([two, other], { zones: [{ name: 'Z1', inForce: 'initiator' }], transmitters: [] }),
    ).filter((c) => c.verdict === 'not_shutting_down');
    expect(found.map((c) => c.sharedPart?.kind)).toEqual(['unit', 'unit']);
    expect(found.flatMap((c) => c.units.map((u) => u.position)).sort()).toEqual([11, 3]);
  });

  it('the gravest comes first', () => {
    const verdicts = causesOf(
      siteOf(
        [
          withUnits(stringOf('A1', 10), [2], 'passing', 'not_shutting_down'),
          withUnits(stringOf('B1', 10, { zone: 'Z2', transmitters: ['T9'] }), [3], 'shutdown', 'stuck'),
        ],
        pressed,
      ),
    ).map((c) => c.verdict);
    expect(verdicts).toEqual(['not_shutting_down', 'stuck']);
  });
});

describe('units that are not heard', () => {
  const half = (s: StringCondition): StringCondition => ({
    ...s,
    slots: s.slots.map((x) =>
      x.position > 5 ? { ...x, gateway: 'G2', state: 'silent' as const, seenS: NOW - 900 } : x,
    ),
  });
  it('share a gateway that nobody is heard through, while their inputs are alive', () => {
    const [cause, ...others] = causesOf(
      siteOf([half(stringOf('A1', 10)), half(stringOf('A2', 10))], {
        gateways: [
          { name: 'G1', lastHeardS: NOW - 10 },
          { name: 'G2', lastHeardS: NOW - 900 },
        ],
      }),
    );
    expect(others).toEqual([]);
    expect(cause).toMatchObject({
      headline: 'Gateway G2 has fallen silent, and 10 units with it',
      verdict: 'silent',
    });
    expect(cause!.evidence).toContain('it is the reports that are missing');
  });
  it('all of them with the logger gone: the logger', () => {
    expect(
      parts(
        [
          withUnits(stringOf('A1', 10), 'all', 'silent', 'ok'),
          withUnits(stringOf('A2', 10), 'all', 'silent', 'ok'),
        ],
        {
          loggers: [{ name: 'L1', connected: false }],
          gateways: [{ name: 'G1', lastHeardS: NOW - 900 }],
        },
      ),
    ).toEqual(['silent logger L1 20']);
  });
  it('after a command, each kind of not knowing has its own line', () => {
    const heard = causesOf(
      siteOf(
        [
          withUnits(stringOf('A1', 6), 'all', null, 'unconfirmed'),
          withUnits(stringOf('A2', 6), 'all', 'unheard', 'unconfirmed'),
          withUnits(stringOf('A3', 6), 'all', 'dark', 'unconfirmed'),
        ],
        { zones: [{ name: 'Z1', inForce: 'initiator' as const }] },
      ),
    ).map((c) => c.headline);
    expect(heard).toHaveLength(3);
    expect(heard.join('; ')).toContain('have not answered the roll call and may not obey the initiator');
  });
});

describe('whatever a site looks like', () => {
  const condition = fc.constantFrom<[UnitState | null, Verdict]>(
    ['passing', 'ok'],
    ['passing', 'ok'],
    ['passing', 'ok'],
    ['shutdown', 'stuck'],
    ['passing', 'not_shutting_down'],
    ['silent', 'ok'],
    ['silent', 'unconfirmed'],
    ['dark', 'unconfirmed'],
    ['unheard', 'unconfirmed'],
    [null, 'unconfirmed'],
  );
  const strings = fc.array(
    fc.record({
      units: fc.array(condition, { minLength: 1, maxLength: 14 }),
      transmitters: fc.subarray(['T1', 'T2'], { minLength: 1 }),
      releasedBy: fc.constantFrom('keep_alive' as const, 'logger' as const),
    }),
    { minLength: 1, maxLength: 8 },
  );
  it('every abnormal unit has exactly one cause per verdict, and confidences are shares', () => {
    fc.assert(
      fc.property(strings, (list) => {
        const made = list.map((s, k) => {
          const string = stringOf(`S${k}`, s.units.length, {
            transmitters: s.transmitters,
            releasedBy: s.releasedBy,
          });
          return {
            ...string,
            slots: string.slots.map((slot, i) => ({
              ...slot,
              state: s.units[i]![0],
              verdict: s.units[i]![1],
            })),
          };
        });
        const causes = causesOf(siteOf(made));
        const named = causes
          .flatMap((c) => c.units.map((u) => `${c.verdict} ${u.stringId} ${u.position}`))
          .sort();
        const expected = made
          .flatMap((s) =>
            s.slots.flatMap((x) =>
              x.verdict !== 'ok'
                ? [`${x.verdict} ${s.id} ${x.position}`]
                : x.state === 'silent'
                  ? [`silent ${s.id} ${x.position}`]
                  : [],
            ),
          )
          .sort();
        expect(named).toEqual(expected);
        expect(new Set(causes.map((c) => c.key)).size).toBe(causes.length);
        for (const c of causes) {
          expect(c.confidence).toBeGreaterThan(0);
          expect(c.confidence).toBeLessThan(1);
          expect(c.headline).not.toMatch(/undefined|NaN/);
          expect(c.evidence).not.toMatch(/undefined|NaN/);
        }
      }),
      { numRuns: 200 },
    );
  });
});
