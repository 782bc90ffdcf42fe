/** What to look at before anybody is called. Common practice of the trade; where somebody might act on a line, it cautions. */

export const CHECKLIST_SOURCE = 'Common practice; the makers’ manuals and local code come first.';

const UNDER_LOAD =
  'Never open a connector under load. Isolate the string, lock out, prove dead with a rated meter; each module and its leads to its unit stay at module voltage.';
const METER =
  'Rated meter and leads, qualified people, local code first. A reading near zero at night or under snow proves nothing.';

export const checklistTexts = {
  command: {
    check: 'Nothing commands shutdown here: initiator, its cable, grid supply',
    why: 'Units that were told to shut down are not stuck. Look at the initiator itself and at who used it last.',
  },
  commanded: {
    check: 'Shutdown is commanded here, for which zone and since when',
    why: 'Only a unit that was told can fail to follow. Where the command has ended meanwhile, it passes rightly; look again when the next one comes.',
  },
  keep_alive: {
    check: 'The transmitter has power, and other strings that hear it pass',
    why: 'Without the keep-alive every unit released by it stays in shutdown. If all strings of one transmitter are affected, it is the transmitter.',
  },
  cross_talk: {
    check: 'Which transmitters run nearby, and whose conductors lie in the same conduit or tray',
    why: 'Units can be kept passing by a neighbour’s signal when their own transmitter stops.',
  },
  roster: {
    check: 'The serials at these positions are those on the as-built',
    why: 'A unit under another serial reports for another place, or for none.',
  },
  replaced: {
    check: 'Nothing was replaced, moved or added here lately without being entered',
    why: 'A new unit that is not on the as-built is not on the roster, so nobody hears it.',
  },
  gateway_power: {
    check: 'The gateway has power and hears other units',
    why: 'All units behind one gateway fall silent together when it loses power, while the inverter’s inputs go on.',
  },
  logger: {
    check: 'The logger has power and network, and its clock is right',
    why: 'Silence may be the way to here and not the roof.',
  },
  daylight: {
    check: 'It is light enough, and no snow or cover lies on these modules',
    why: 'Units live on their module’s power: in the dark and under snow they say nothing.',
  },
  module_leads: {
    check: 'The module’s own leads are mated to its unit, both of them, to the stop',
    why: 'A unit without its module has no power and is silent; the string then gives one voltage less.',
    caution: UNDER_LOAD,
  },
  long_leads: {
    check: 'The long leads are mated right through the string, none pinched or chafed',
    why: 'One open long lead makes an open circuit: the meter then shows a floating figure.',
    caution: UNDER_LOAD,
  },
  connectors: {
    check:
      'Both halves of every connector are of one type and maker, or a documented pair; no heat marks, no water',
    why: 'Halves that click together may still not belong together: resistance grows, and heat with it.',
    caution: UNDER_LOAD,
  },
  left_out: {
    check: 'No module is wired straight past its unit',
    why: 'Such a string can’t shut down: it keeps one module’s voltage whatever is commanded.',
    caution: UNDER_LOAD,
  },
  told: {
    check: 'Everybody on site was told to treat these conductors as live',
    why: 'Until the voltage is measured on the conductors, nothing shows that they are off.',
    caution: METER,
  },
  meter: {
    check: 'One reading at the home run’s inverter end: + to −, + to earth, − to earth',
    why: 'A claim is not a voltage: only the conductors show what stands on them.',
    caution: METER,
  },
  fuses: {
    check: 'Fuses, terminals and the load-break device of this string',
    why: 'A blown fuse or a loose terminal takes the current of a whole string and leaves its voltage.',
    caution: UNDER_LOAD,
  },
  inverter: {
    check: 'The inverter runs: no fault, no curtailment, no power limit, grid present',
    why: 'A limited inverter lowers the current of every string, and none of them is at fault.',
  },
  shade: {
    check: 'What throws shade on these modules at the hours of the loss, in this season',
    why: 'Loss at the same sun positions every day is shade: growth, a mast, a new neighbour.',
  },
  soiling: {
    check: 'Dirt, leaves, bird droppings or snow on these modules',
    why: 'Dirt loses slowly and comes back at rain; one covered module holds back its part of the string.',
    caution: 'Roofs: falls. Wet glass and a broken module can carry voltage to its frame.',
  },
  siblings: {
    check: 'Other strings of the plane at the same minute',
    why: 'What all of them lack is weather, the inverter or the grid.',
  },
  module_damage: {
    check: 'Glass, back sheets and frames: cracks, burn marks, hot places',
    why: 'A bypassed sub-string costs about a third of a 60-cell module’s voltage.',
    caution: 'Do not touch a broken module: its frame and glass may carry voltage.',
  },
  same_meter: {
    check: 'The inverter’s figure for this input agrees with a meter',
    why: 'A difference that grows with voltage and not with current is calibration, not resistance.',
    caution: METER,
  },
  cable: {
    check: 'Length and cross-section of the home run as entered',
    why: 'A longer cable than entered looks like a bad connector.',
  },
  isolate_one: {
    check: 'One string isolated by its load-break device while the page watches whose current goes to zero',
    why: 'This decides which string a unit sits in; figures alone only suspect it.',
    caution: UNDER_LOAD,
  },
  seen: {
    check: 'What was seen is in a photo, with position and time',
    why: 'Whoever comes next starts from it.',
  },
} satisfies Record<string, { check: string; why: string; caution?: string }>;
