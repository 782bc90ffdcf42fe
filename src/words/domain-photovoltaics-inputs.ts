/** Strings that share an input, held against each other and against the input. */
export const inputDesignSaid = {
  stringsFit: (strings: number, takes: number) =>
    `${strings} strings share an input; its type takes ${takes}.`,
  tooManyStrings: (input: string, strings: readonly string[], takes: number) =>
    `${input} has ${strings.length} strings (${strings.join(', ')}); its type takes ${takes}.`,
  stringsClause: 'Inverter’s instructions',
  stringsRemedy: 'Spread the strings over more inputs, or join them in a combiner that the maker allows.',
  mixedKinds: (input: string, types: readonly string[]) =>
    `${input} joins strings of different kinds of units (${types.join(', ')}): they are released and shut down differently, and while one string is held the other feeds its conductors.`,
  mixedTypes: (input: string, types: readonly string[]) =>
    `${input} joins strings of different unit types of one kind (${types.join(', ')}).`,
  mixedUnitsClause: 'Units’ instructions; common practice: one kind on an input',
  mixedKindsRemedy: 'Give each kind an input of its own.',
  mixedTypesRemedy: 'Ask the makers whether their units may share an input.',
  voltagesAlike: (spread: string) =>
    `Strings of one input have voltages at maximum power within ${spread} of each other.`,
  voltagesDiffer: (
    input: string | null,
    low: string,
    high: string,
    strings: readonly { name: string; modules: number }[],
  ) =>
    `The strings of ${input ?? 'the input'} share one voltage but would work at ${low} to ${high} (modules: ${strings.map(({ name, modules }) => `${name} ${modules}`).join(', ')}). The short one pulls the others down; it costs energy, and in poor light current can flow back.`,
  voltagesClause: 'Strings in parallel share one voltage; own rule: 2 %',
  voltagesRemedy: 'Give strings of different length inputs of their own.',
  planesDiffer: (input: string, planes: readonly string[]) =>
    `${input} joins strings of different planes (${planes.join(', ')}): their currents add up under one tracker, and low output of one can’t be told from a cloud on the other. It costs little energy and is no hazard.`,
  planesClause: 'Own rule: 5° of tilt, 10° of azimuth',
  planesRemedy: 'Give each plane inputs of its own where there are enough.',
};

/** Where two connectors meet in a string. */
export type ConnectorPlace = 'connector_module_unit' | 'connector_unit_unit';
const PLACE: Record<ConnectorPlace, string> = {
  connector_module_unit: 'Module lead on unit',
  connector_unit_unit: 'Unit on its neighbour',
};
export const connectorDesignSaid = {
  unknown: (place: ConnectorPlace) =>
    `${PLACE[place]}: the catalogue doesn’t say which connectors these types have.`,
  found: (place: ConnectorPlace, found: string, evidence: string | null) =>
    `${PLACE[place]}: ${found}${evidence ? ` ${evidence}.` : ''}`,
  enterConnectors: 'Enter the connectors of module and unit type in the catalogue.',
  lookAtRoof:
    'The catalogue may name another connector than stands on the roof: the install check looks at both halves.',
};
