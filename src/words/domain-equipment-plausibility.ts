/** What can't be, and what is unusual, about a module's datasheet. */
export const modulePlausibilitySaid = {
  vmpAboveVoc: (vmp: number, voc: number) =>
    `vmp (${vmp} V) must be below voc (${voc} V). Check that the two aren’t swapped.`,
  impAboveIsc: (imp: number, isc: number) =>
    `imp (${imp} A) must be below isc (${isc} A). Check that the two aren’t swapped.`,
  cellVoltage: (cells: number, voltsACell: string) =>
    `${cells} cells make ${voltsACell} V a cell; a cell gives 0.25 to 1.5 V. Of half-cut cells count those in series.`,
  fillFactor: (found: string) =>
    `The fill factor is ${found}; modules have 0.60 to 0.88. One of the four values is probably of another line.`,
  powerInName: (pmp: string, named: number) => `vmp times imp is ${pmp} W, and the name says ${named} W.`,
  betaVocInVolts: (share: string, voltsPerK: string, toType: string) =>
    `${share}/K is unusual; if the sheet says ${voltsPerK} V/K, type ${toType} %/K.`,
  betaVoc: (share: string) => `${share}/K is unusual: crystalline silicon has −0.20 to −0.36 %/K.`,
  alphaIsc: (share: string) =>
    `${share}/K is unusual: crystalline silicon has 0.03 to 0.07 %/K. Check that it isn’t mA/K.`,
  gammaPmpSmall: (power: string, together: string) =>
    `Power falls by ${power}/K, less than voc and isc together let it (${together}/K). The two coefficients may be swapped.`,
  gammaPmpLarge: (power: string, voltage: string) =>
    `Power falls by ${power}/K, far more than voc (${voltage}/K). Check both.`,
  size: (pmp: string, area: string, density: string) =>
    `${pmp} W on ${area} m² are ${density} W/m²; modules have 120 to 240 W/m². Sizes are in metres.`,
  fuse: (current: string) =>
    `The maximum series fuse is below 125 % of isc (${current} A): no fuse would hold in full sun.`,
};

/** The same of units, connectors and inverters. */
export const plausibilitySaid = {
  lowestAboveNominal: (min: number, nominal: number) =>
    `The lowest shutdown voltage (${min} V) is above the shutdown voltage (${nominal} V). Lower it.`,
  highestBelowNominal: (max: number, nominal: number) =>
    `The highest shutdown voltage (${max} V) is below the shutdown voltage (${nominal} V). Raise it.`,
  measuresNothing:
    'A unit of this kind reports what it measures. Choose a side, or the kind "Shutdown only".',
  holds:
    'A unit that holds its state does not shut down when its command or keep-alive stops: design checks will say so.',
  slow: (seconds: number) => `${seconds} s is longer than the 30 s of NEC 690.12(B).`,
  shutdownVoltage:
    'Common practice is 0.6 V a unit. Check that volts were typed, for one unit, open circuit.',
  bypassVoltage: 'A bypass path usually drops 0.3 to 0.7 V (−0.3 to −0.7 V here, from experience).',
  passingByKeepAlive:
    'Units released by a keep-alive usually leave the box in shutdown. Check the maker’s sheet.',
  silentKind: 'Units of the kind "Shutdown only" report nothing and hear no logger.',
  power: (watts: number) =>
    `Maximum voltage times maximum current is ${watts} W: the power can’t be reached.`,
  accuracy: 'Units usually measure within 0.5 to 3 %. Findings rest on this figure.',
  connectorScope: 'IEC 62852 covers connectors up to 1500 V and 125 A: check the sheet.', // from its scope
  windowBackwards: (to: number, from: number) =>
    `The window ends at ${to} V and begins at ${from} V. Its end must be above its beginning.`,
  windowAboveVoltage: (to: number, most: number) =>
    `The window ends at ${to} V, above the maximum DC voltage of ${most} V.`,
  shortCircuitBelow: (isc: number, current: number) =>
    `The maximum short-circuit current (${isc} A) is below the operating current (${current} A). Check which is which.`,
  reach: (kilowatts: string) =>
    `All inputs at the top of the window take ${kilowatts} kW, less than the AC power. Check kW, and whether the current is of one input.`,
  narrowWindow: 'The window is unusually narrow: full-power range and whole range are two lines of a sheet.',
};
