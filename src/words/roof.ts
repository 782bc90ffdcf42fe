import { number } from '../drawings/numbers';

export const layPanel = {
  layAString: 'Lay a string',
  slotsModulesPlaneSurfaceTilt: (slots: number, plane: string, surfaceTilt: number) =>
    `${slots} modules, ${plane}, ${surfaceTilt}°`,
  string: 'String',
  onTheRoof: 'on the roof',
  notOnTheRoof: 'not on the roof yet',
  orTapTheRoof: 'or tap the roof',
  dEaves: (d: string) => `${d} (eaves)`,
  inDegrees: 'in degrees',
  nextRowLiesTo: 'Next row lies to the',
  fromNorthClockwise: 'from north, clockwise',
  modulesStand: 'Modules stand',
  upright: 'upright',
  across: 'across',
  serpentineEveryOtherRow: 'Serpentine: every other row runs back',
  countedFrom: 'Counted from',
  compassEnd: (compass: string) => `${compass} end`,
  positionIsThen: (roofPlace: undefined | string) => `Position 1 is then: ${roofPlace ?? ''}.`,
  eachBeginsOnThe: 'each begins on the row after the last',
  layLaid1Laid: (laid: number, which: string) => `Lay ${laid > 1 ? `${laid} strings` : which}`,
};

export const outlinePanel = {
  outline: 'Outline',
  inPlan: (outline: number) => `${number(outline)} m² in plan`,
  outlinePoints: (outline: number) => `${outline} points`,
  tapTheCornersOf:
    'Tap the corners of the roof on the drawing, or begin with a rectangle. North is up; 0, 0 is a corner that you choose.',
  pointsOfTheOutline: 'Points of the outline in metres',
  no: 'No.',
  eastM: 'East (m)',
  northM: 'North (m)',
  remove: 'Remove',
  pointIi: (i: number, axis: number) => `Point ${i + 1}, ${axis === 0 ? 'east' : 'north'}`,
  removePoint: (i: number) => `Remove point ${i + 1}`,
  width: 'Width',
  depth: 'Depth',
  turned: 'Turned',
  beginAnewWithA: 'Begin anew with a rectangle',
  aRectangle: 'A rectangle',
  clockwiseFromEast: 'clockwise from east',
  drawIt: 'Draw it',
};

export const placesSheet = {
  placesOf: (which: string) => `Places of ${which}`,
  asAPersonFinds: 'as a person finds them',
  position: 'Position',
  eastM: 'East (m)',
  northM: 'North (m)',
  inWords: 'In words',
  positionEast: (position: number) => `Position ${position}, east`,
  positionNorth: (position: number) => `Position ${position}, north`,
  positionInWords: (position: number) => `Position ${position} in words`,
};

export const roofBoard = {
  theOutline: 'the outline',
  string: 'string',
  strings: 'strings',
  commissioning: 'Commissioning',
  asBuilt: 'As-built',
  roof: 'Roof',
  lookAtTheAs: 'Look at the as-built',
  keepMineAndLook: 'Keep mine and look',
  takeTheirs: 'Take theirs',
  theRoofIsKept: 'The roof is kept',
  readSerialsOnSite: 'Read serials on site',
  whatIsDrawn: 'What is drawn',
  outline: 'Outline',
  strings2: 'Strings',
  fromAbove: 'From above',
  undo: 'Undo',
  redo: 'Redo',
  why: 'Why',
  whyIfItIs: 'Why (if it is worth telling)',
  saveWhat: (what: string) => `Save ${what}`,
  thereAreNoStrings: 'There are no strings yet',
  bringThemInFrom: 'Bring them in from a file',
};

export const roofCanvas = {
  roofFromAboveWith: (outline: number, filter: number) =>
    `Roof from above with ${outline} points of its outline and ${filter} strings`,
  pointAtEastNorth: (index: number, x: number, y: number) =>
    `Point ${index + 1} at ${x} m east, ${y} m north. Arrow keys move it, with Shift by metres; Delete removes it.`,
};

export const roofDraft = {
  ofOutsideTheOutline: (outside: number, which: string) =>
    `${outside} ${outside === 1 ? 'module' : 'modules'} of ${which} ${outside === 1 ? 'lies' : 'lie'} outside the outline.`,
  andLieUponEach: (which: string, which2: string) => `${which} and ${which2} lie upon each other.`,
};

export const layingForm = {
  firstModuleEast: 'First module, east',
  firstModuleNorth: 'First module, north',
  rowRunsTowards: 'Row runs towards',
  modulesInARow: 'Modules in a row',
  betweenModules: 'Between modules',
  betweenRows: 'Between rows',
  stringsAlike: 'Strings alike',
};

export const roofUseRoof = {
  notSaved: 'Not saved',
};
