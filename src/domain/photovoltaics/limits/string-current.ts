import { figure, held, type DesignFinding } from './design-finding';
import type { StringDesign } from './design';
import { circuitCurrents } from './string-sizing';

/** Currents and powers held against inputs, units and fuses. */
export function currentFindings(design: StringDesign): DesignFinding[] {
  const { modules, unit, inverter, onInput } = design;
  const isc = Math.max(...modules.map(({ type }) => type.iscRef));
  const pmp = Math.max(...modules.map(({ type }) => type.vmpRef * type.impRef));
  const strings = onInput.length;
  const own = circuitCurrents(isc).currentMax;
  const noType = 'The inverter has no type, so the limits of its inputs aren’t known.';
  const optimizing = unit.kind === 'optimizing';
  const entries: DesignFinding[] = [
    held({
      check: 'unit_current',
      value: own,
      limit: unit.currentMax,
      unit: 'A',
      clause: 'NEC 690.8(A)(1), unit’s maximum current according to the type entered',
      within: `125 % of isc is ${figure(own, 'A')}.`,
      exceeded: `125 % of isc is ${figure(own, 'A')}, above the unit’s limit.`,
      remedy: 'Choose a unit for a higher current, or a module with a lower one.',
      alternatives: [
        'Ask the unit’s maker whether the limit is meant for isc as printed, without the 125 %.',
      ],
    }),
    held({
      check: 'unit_power',
      value: pmp,
      limit: unit.powerMax,
      unit: 'W',
      clause: 'Unit’s maximum module power according to the type entered',
      within: `The module has ${figure(Math.round(pmp), 'W')}.`,
      exceeded: `The module has ${figure(Math.round(pmp), 'W')}, more than the unit is made for.`,
      remedy: 'Choose a unit for a larger module.',
    }),
  ];
  if (!optimizing) {
    const shortCircuit = 1.25 * onInput.reduce((a, s) => a + s.iscRef, 0);
    const operating = onInput.reduce((a, s) => a + s.impRef, 0);
    const all = strings === 1 ? '125 % of isc' : `125 % of isc of ${strings} strings`;
    entries.push(
      held({
        check: 'input_short_circuit',
        value: shortCircuit,
        limit: inverter?.iscMax ?? null,
        unit: 'A',
        clause: 'NEC 690.8(A)(1), input’s maximum short-circuit current',
        missing: noType,
        within: `${all} is ${figure(shortCircuit, 'A')}.`,
        exceeded: `${all} is ${figure(shortCircuit, 'A')}, above what the input may see.`,
        remedy: inverter ? 'Spread the strings over more inputs.' : 'Give the inverter its type.',
        alternatives: [
          'Ask the inverter’s maker whether the limit is meant for isc as printed, without the 125 %.',
        ],
      }),
      held({
        check: 'input_operating_current',
        value: operating,
        limit: inverter?.currentMax ?? null,
        unit: 'A',
        safety: false,
        clause: 'Input’s maximum operating current',
        missing: noType,
        within: `At full sun the input takes ${figure(operating, 'A')}.`,
        exceeded: `At full sun the strings offer ${figure(operating, 'A')}; the input takes no more than its limit. It costs energy and is no hazard.`,
        remedy: inverter
          ? 'Spread the strings over more inputs, or accept the loss.'
          : 'Give the inverter its type.',
      }),
      fuseFinding(design, isc),
    );
  }
  return entries;
}

/** What the other strings of an input can push back through one, against the modules' series fuse. */
function fuseFinding({ modules, onInput }: StringDesign, isc: number): DesignFinding {
  const fuseMax = Math.min(...modules.map(({ type }) => type.fuseMax));
  const others = onInput.length - 1;
  const back = 1.25 * isc * others;
  const fuse = circuitCurrents(isc).overcurrentDeviceMin;
  const shared = {
    check: 'series_fuse',
    unit: 'A',
    safety: true,
    value: back,
    limit: fuseMax,
    clause: 'NEC 690.9 (from memory), modules’ maximum series fuse',
  } as const;
  if (back <= fuseMax)
    return {
      ...shared,
      outcome: 'within',
      words:
        others === 0
          ? 'No other string is on the input: nothing feeds back.'
          : `${others === 1 ? 'The other string' : `The other ${others} strings`} can feed back ${figure(back, 'A')}: no string fuse is needed by this arithmetic.`,
      remedy: null,
      alternatives: [],
    };
  const needs = `The other ${others} strings can feed back ${figure(back, 'A')}, more than the modules’ series fuse of ${figure(fuseMax, 'A')}`;
  if (fuse > fuseMax)
    return {
      ...shared,
      outcome: 'exceeded',
      words: `${needs}; a fuse would need at least ${figure(fuse, 'A')}, so none fits.`,
      remedy: 'Put fewer strings on the input.',
      alternatives: [],
    };
  return {
    ...shared,
    outcome: 'cannot_tell',
    words: `${needs}. Each string needs a fuse of ${figure(fuse, 'A')} to ${figure(fuseMax, 'A')}; whether one is fitted isn’t recorded.`,
    remedy: 'Check that string fuses are fitted and rated for DC.',
    alternatives: ['Put fewer strings on the input.'],
  };
}
