import {
  designFindingSaid,
  seriesFuseSaid,
  stringCurrentSaid as said,
} from '../../../words/domain-photovoltaics-limits';
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
  const optimizing = unit.kind === 'optimizing';
  const entries: DesignFinding[] = [
    held({
      check: 'unit_current',
      value: own,
      limit: unit.currentMax,
      unit: 'A',
      clause: said.unitClause,
      within: said.unitWithin(figure(own, 'A')),
      exceeded: said.unitExceeded(figure(own, 'A')),
      remedy: said.unitRemedy,
      alternatives: [said.unitAskMaker],
    }),
    held({
      check: 'unit_power',
      value: pmp,
      limit: unit.powerMax,
      unit: 'W',
      clause: said.powerClause,
      within: said.powerWithin(figure(Math.round(pmp), 'W')),
      exceeded: said.powerExceeded(figure(Math.round(pmp), 'W')),
      remedy: said.powerRemedy,
    }),
  ];
  if (!optimizing) {
    const shortCircuit = 1.25 * onInput.reduce((a, s) => a + s.iscRef, 0);
    const operating = onInput.reduce((a, s) => a + s.impRef, 0);
    entries.push(
      held({
        check: 'input_short_circuit',
        value: shortCircuit,
        limit: inverter?.iscMax ?? null,
        unit: 'A',
        clause: said.inputClause,
        missing: said.noInverterType,
        within: said.inputWithin(strings, figure(shortCircuit, 'A')),
        exceeded: said.inputExceeded(strings, figure(shortCircuit, 'A')),
        remedy: inverter ? said.spread : designFindingSaid.giveInverterType,
        alternatives: [said.inputAskMaker],
      }),
      held({
        check: 'input_operating_current',
        value: operating,
        limit: inverter?.currentMax ?? null,
        unit: 'A',
        safety: false,
        clause: said.operatingClause,
        missing: said.noInverterType,
        within: said.operatingWithin(figure(operating, 'A')),
        exceeded: said.operatingExceeded(figure(operating, 'A')),
        remedy: inverter ? said.spreadOrAccept : designFindingSaid.giveInverterType,
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
    clause: seriesFuseSaid.clause,
  } as const;
  if (back <= fuseMax)
    return {
      ...shared,
      outcome: 'within',
      words:
        others === 0 ? seriesFuseSaid.nothingFeedsBack : seriesFuseSaid.noneNeeded(others, figure(back, 'A')),
      remedy: null,
      alternatives: [],
    };
  const needs = [others, figure(back, 'A'), figure(fuseMax, 'A'), figure(fuse, 'A')] as const;
  if (fuse > fuseMax)
    return {
      ...shared,
      outcome: 'exceeded',
      words: seriesFuseSaid.noneFits(...needs),
      remedy: seriesFuseSaid.fewerStrings,
      alternatives: [],
    };
  return {
    ...shared,
    outcome: 'cannot_tell',
    words: seriesFuseSaid.needed(...needs),
    remedy: seriesFuseSaid.checkFuses,
    alternatives: [seriesFuseSaid.fewerStrings],
  };
}
