import { number, percent } from '../drawings/numbers';

export const methodSheet = {
  source: 'Source',
  limits: 'Limits',
};

export const methodsMath = {
  formulaLabel: (label: string) => `Formula: ${label}`,
};

export const notesConduct = {
  whatAMeterReading: 'What a meter reading means',
  everyWayInWhich: (tellFrom: number) =>
    `Every way in which the string can be (all in shutdown, some passing, a module not mated, reversed, an open lead and more) foretells a voltage and its uncertainty. The reading weighs them by Bayes. From a chance of ${percent(tellFrom)} on an explanation is named as the finding; below that we say “can’t tell” and show what fits.`,
  chanceOfAnExplanation: 'chance of an explanation',
  voltageThatAnExplanation: 'voltage that an explanation foretells',
  unitsPassTheirModules: (nominal: number, min: number, max: number, asExpected: number) =>
    `p units pass their module's open-circuit voltage, s are in shutdown at ${nominal} V (${min} to ${max} V by the preset). A string that is as it should be starts at ${percent(asExpected)}.`,
  unitInShutdownCommon: (nominal: number) =>
    `${nominal} V a unit in shutdown: common practice. Its spread and all starting chances: from experience.`,
  openCircuitVoltageFrom: 'Open-circuit voltage from the datasheet (see the expected voltage below).',
  toleranceOfTheSheet: 'Tolerance of the sheet ±3 %: as sheets state by IEC 61215.',
  oneReadingOfA:
    'One reading of a string in shutdown often fits two explanations: one unit is worth little more than the tolerance of all.',
  theTypeOfUnit: 'The type of unit, the count and what is commanded are taken as entered.',
  atNightAndUnder: 'At night and under snow a low reading proves nothing.',
  readingsToEarthThat:
    'Readings to earth that add up to the string’s are a fault; its place is told only where all modules give like voltages.',
  stateAndVerdictOf: 'State and verdict of a unit',
  theStatePassingIn:
    'The state (passing, in shutdown, silent, dark, not heard) is the unit’s own claim unless a voltage measured on its conductors contradicts it. The verdict holds it against what is commanded: stuck, not shutting down, late, flapping, or unconfirmed where nothing shows what it did.',
  notShuttingDown: 'not shutting down',
  stuck: 'stuck',
  inShutdown: 'in shutdown',
  silent: 'silent',
  withReportsEveryThe: (graceS: number, flapChanges: number, flapWindowS: number) =>
    `With reports every 60 s the grace is ${graceS} s. ${flapChanges} changes within ${flapWindowS / 60} min that no command explains are flapping.`,
  timeLimit: (timeLimitS: number, source: string, timeLimitS2: number, source2: string) =>
    `Time limit ${timeLimitS} s: ${source}. ${timeLimitS2} s: ${source2}.`,
  graceSilenceAndFlapping: 'Grace, silence and flapping: settings, from experience.',
  aClaimIsOnly: 'A claim is only a claim: an output inferred from it is drawn dashed and called assumed.',
  reportsComeAtIntervals: 'Reports come at intervals, so the time to shutdown is an interval too.',
  whileShutdownIsCommanded:
    'While shutdown is commanded, a unit that says nothing is never taken to be in order.',
  whatTheConductorsSay: 'What the conductors say against the claims',
  theVoltageOfAn: (not_shutting_down: number) =>
    `The voltage of an inverter input is held against what the units of its strings claim. If it stays up though all claim shutdown, the string is not shutting down, position unknown. ${not_shutting_down} readings must agree. While released, the units’ outputs must add up to the input; where units tell nothing, the missing voltage says how many are held.`,
  thresholdOnTheHome: 'threshold on the home run',
  outputsAgainstTheInput: 'outputs against the input, released',
  heldUnitsOfA: 'held units of a silent string',
  heldUnitsAreCounted: (steadyDeviations: number, steadyS: number, inputsDiffer: number) =>
    `Held units are counted where they miss six tenths of a module or ${steadyDeviations} standard deviations for ${steadyS / 3600} h, for a shadow moves on. Inputs of one inverter are taken to differ by ${percent(inputsDiffer, 1)} a module.`,
  outsideTheArrayBoundary: (outsideArrayLimitV: number) =>
    `${outsideArrayLimitV} V outside the array boundary: NEC 690.12(B)(1).`,
  twiceTheUnitsHighest: 'Twice the units’ highest shutdown voltage: our own rule.',
  anInvertersCapacitorsHold: (capacitorHoldS: number, flowsFromA: number) =>
    `An inverter's capacitors hold the home run up: unless more than ${number(flowsFromA, 1)} A flow, nothing is said for ${capacitorHoldS} s after the limit.`,
  stringsThatShareAn:
    'Strings that share an input share its voltage: which of them it is can not be told, and a held unit in one of silent strings shows as current only.',
  unitsThatMeasureTheir:
    'Units that measure their module only: their outputs are what they claim. One of more than about fourteen is within the input’s own accuracy.',
  aShadowThatStays:
    'A shadow that stays two hours on as many modules reads like held units. Without other strings on the inverter one held unit of many is within what a datasheet foretells.',
  invertersReadAFew: 'Inverters read a few volts badly. A low figure is no witness of a shutdown.',
  causes: 'Causes',
  theSmallestSetOf:
    'The smallest set of shared parts (gateway, transmitter, string, inverter input, logger, zone) that explains the abnormal units. What a rival explains as well is kept beside it.',
  gainOfAnExplanation: 'gain of an explanation',
  showIt: 'show it',
  doNot: 'do not',
  cAreCostsLn:
    'c are costs, −ln of a probability. The part with the greatest gain is taken first, then the rest again.',
  greedyCoverVChvtal: 'Greedy cover: V. Chvátal, 1979.',
  costsOfFailuresFrom: 'Costs of failures: from experience. They rank explanations and are no statistics.',
  inferredFromAfarOnly: 'Inferred from afar: only a look at the part decides.',
  partsThatTheAs: 'Parts that the as-built does not name can not be found.',
  theExpectedVoltage: 'The expected voltage',
  whatAPassingUnit:
    'What a passing unit should give now, from the most direct source there is: like strings of the plane, the string’s own passing units, the datasheet under measured light, the datasheet under a clear sky.',
  openCircuitVoltageFromA: 'open-circuit voltage from a datasheet',
  logarithmOfTheLight: 'Logarithm of the light: the diode equation. Cell temperature without a sensor: NOCT.',
  spreadFromAtLeast: (siblingsForSpread: number) =>
    `Spread from at least ${siblingsForSpread} siblings: 1.4826 × MAD (Iglewicz & Hoaglin 1993). Otherwise fixed and wide, from experience.`,
  shadeOnAModule: 'Shade on a module is not foreseen.',
  underLoadTheDatasheets:
    'Under load the datasheet’s ratio of working to open-circuit voltage is taken as constant.',
};

export const notesOutput = {
  lowOutput: 'Low output',
  eachDaysSpecificYield: (daysLow: number, daysLookedAt: number) =>
    `Each day’s specific yield of a string over that of its plane. Clipping, curtailment, grid loss, commanded shutdown and gaps are taken out first. Low on ${daysLow} of ${daysLookedAt} days with enough sun makes a finding; then the shape of the loss is looked at.`,
  modifiedZScore: 'modified z-score',
  andAtLeastBelow: (lossMin: number, sunEnough: number) =>
    `and at least ${percent(lossMin)} below its siblings. A day counts from ${sunEnough} kWh/kWp on.`,
  iglewiczHoaglin: (zLimit: number) => `|z| > ${zLimit}: Iglewicz & Hoaglin 1993.`,
  betweenStringsIec: (lossMin: number) => `${percent(lossMin)} between strings: IEC 62446-1.`,
  fewerThanStringsIn: (siblingsMin: number) =>
    `Fewer than ${siblingsMin} strings in a plane: the datasheet model stands in, with a wide band.`,
  whereStringsShareAn: 'Where strings share an input, their sum is judged.',
  whatAllStringsOf: 'What all strings of a plane lose alike does not show here.',
  aWeakUnitIn: 'A weak unit in its string',
  eachUnitsVoltageOver:
    'Each unit’s voltage over the median of its string, quarter by quarter of a day under load. A unit that is low nearly all day is told by how much is missing: all of it (held in shutdown, not mated), a whole number of bypassed sub-strings, or anything else; one that is low for some hours only is shaded, or has a contact that comes and goes.',
  low: 'low',
  kOfMSub: 'k of m sub-strings bypassed',
  isMadOverThe: (heldBelow: number, mOSTLY: number) =>
    `σ is 1.4826 × MAD over the string's units. Nothing passes below ${percent(heldBelow)}; nearly all day means ${percent(mOSTLY)} of the quarters.`,
  robustStandardDeviationsIglewicz: (deviationsUnit: number, lossMinUnit: number) =>
    `${deviationsUnit} robust standard deviations: Iglewicz & Hoaglin 1993. At least ${percent(lossMinUnit)}: from experience.`,
  halfAVoltAcross: 'Half a volt across a bypass diode: from experience.',
  fewerThanUnitsOr: (unitsMin: number, quartersMin: number) =>
    `Fewer than ${unitsMin} units or ${quartersMin} quarters under load say nothing.`,
  anOptimizingUnitMoves: 'An optimizing unit moves its output, so its module side is looked at.',
  unitsInParallelStrings: 'Units in parallel strings are held against their own string only.',
  unitsThatReportNothing: 'Units that report nothing have no voltage of their own to look at.',
  wrongPlaceOnThe: 'Wrong place on the drawing',
  unitsInSeriesCarry:
    'Units in series carry one current. A unit whose current differs from its own string’s and agrees with another’s sits in that other string. Differences against the units’ accuracy count, not correlation: under a clear sky all strings correlate.',
  oddsNeeded: 'odds needed',
  otherString: 'other string',
  ownString: 'own string',
  currentsInSeriesAre: 'Currents in series are equal: Kirchhoff.',
  aWrongPlaceIs: 'A wrong place is taken to be one in a thousand: from experience.',
  namesTheOtherString: 'Names the other string, never the position.',
  beforeTheInverterRuns: 'Before the inverter runs there is nothing to tell from.',
  aConnectorGoingBad: 'A connector going bad',
  betweenTheUnitsAnd:
    'Between the units and the inverter input voltage is lost in proportion to the current. A robust fit finds the resistance; growth against its own past, or more than like strings have, is heat in one place.',
  loopOfAString: 'loop of a string',
  heat: 'heat',
  isTheMeanOf: (excessOhm: number, deviationsLoop: number, loopsMin: number) =>
    `U is the mean of both ends; b takes up gain errors. ${excessOhm} Ω more than before is worth a look, if it is ${deviationsLoop} standard deviations as well. What ${loopsMin} or more strings show alike is the weather's and taken off.`,
  theilSenSlopesP: 'Theil–Sen slopes: P. K. Sen, 1968.',
  threshold10WIn: 'Threshold: 10 W in one place at 10 A, from experience.',
  bothEndsMustBe:
    'Both ends must be read at one moment. Where the input tells its current, readings whose currents disagree are left out; what is left of the tracker’s wobble makes three days good for about 0.05 Ω.',
  connectorsBetweenAModule:
    'Connectors between a module and its unit lie outside this loop: no finding is not proof.',
  aCableIsTold: 'A cable is told from a connector only by growth or by like strings.',
  theShutdownTest: 'The shutdown test',
  aPassNeedsA:
    'A pass needs a rated instrument at the inverter end of the home run: + to −, + to earth and − to earth, within the time of the rule set. Reports alone can only be consistent with a shutdown.',
  passOfAString: 'pass of a string',
  vAt: ' V  at  ',
  withinNecAndLater: (outsideArrayLimitV: number, timeLimitS: number) =>
    `${outsideArrayLimitV} V within ${timeLimitS} s: NEC 690.12(B)(1), 2017 and later editions.`,
  aResultSpeaksOf: 'A result speaks of the day of the test.',
  withoutLightThatPowers: 'Without light that powers the units a dead string proves nothing.',
  withSeveralTransmittersEach: 'With several transmitters each must be taken off alone once.',
  theForecastOfA: 'The forecast of a roll call',
  howManyOfThe:
    'How many of the units not yet heard will still answer, and by when. Strings, gateways and blocks of serials of which not one has stirred, though others long have, are named and left out.',
  notYetHeardAfter: 'not yet heard after a time',
  neverAnswerTheBand: (bAND: number, notStirredBelow: number) =>
    `ν never answer. The band holds the middle ${percent(bAND)}; a group counts as not stirred below a chance of ${percent(notStirredBelow)}.`,
  cureModelBoag1949:
    'Cure model: Boag 1949; Berkson & Gage 1952. Weighed on a grid by Bayes, priors from experience.',
  fewerThanHeardSay: (heardMin: number) => `Fewer than ${heardMin} heard say nothing of the rest.`,
  untilTheRollCall: 'Until the roll call is complete every string is to be treated as live.',
  yieldsAndThePerformance: 'Yields and the performance ratio',
  whatThePlantMade:
    'What the plant made over what the light on its planes would have made at rated power, with the completeness beside each figure.',
  performanceRatio: 'performance ratio',
  theCorrectedRatioWeighs:
    'The corrected ratio weighs each interval of the denominator by 1 + γ (T − 25 °C).',
  iec6172412017: 'IEC 61724-1:2017, clause 10.',
  anIntervalCountsOnly: 'An interval counts only if it has both light and power.',
  saysNothingOfWhy: 'Says nothing of why a ratio is low.',
};
