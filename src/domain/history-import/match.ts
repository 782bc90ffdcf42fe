/** Guesses what the columns of a file mean, from their headers and first rows. A person looks at it before anything is read. */
import { bareHeader } from '../commissioning/import/columns';
import { decimalMarkOf } from '../commissioning/import/number';
import {
  UNITS,
  type ColumnUse,
  type KnownSubjects,
  type Layout,
  type PlaceColumn,
  type Quantity,
  type Subject,
} from './layout';
import { looksLikeClock, looksLikeTime, saysDayFirst } from './times';

const words = (text: string): string[] => text.split('|').map(bareHeader);
const PLACES: readonly [PlaceColumn, readonly string[]][] = [
  [
    'at',
    words(
      'date and time|date time|datetime|timestamp|time stamp|time (utc)|zeitstempel|datum uhrzeit|datum zeit|date heure|fecha hora|data ora|tijdstip|at|when|interval start',
    ),
  ],
  ['date', words('date|day|datum|tag|jour|fecha|dia|data|giorno')],
  ['clock', words('time|time of day|clock|uhrzeit|zeit|heure|hora|ora|tijd')],
  ['string', words('string|string name|strang|chaine|cadena|stringa')],
  ['position', words('position|pos|slot|place in string|platz|posicion|posizione')],
  ['inverter', words('inverter|inverter name|inv|wechselrichter|wr|onduleur|inversor|omvormer')],
  ['input', words('input|mppt|mpp tracker|tracker|dc input|eingang')],
];
const QUANTITY_WORDS: readonly [Quantity, readonly string[]][] = [
  ['energy', words('energy|yield|production|generation|energie|ertrag|energia|kwh|wh|mwh|opbrengst')],
  [
    'power',
    words('power|leistung|puissance|potencia|potenza|vermogen|pac|pdc|p ac|p dc|ac power|dc power|kw|w'),
  ],
  ['voltage', words('voltage|volt|volts|spannung|tension|tensione|spanning|udc|u dc|vdc|v dc|u|v')],
  ['current', words('current|amp|amps|ampere|strom|courant|corriente|corrente|stroom|idc|i dc|i|a')],
  ['temperature', words('temperature|temp|temperatur|temperatura|t|c')],
];

const has = (bare: string, phrase: string): boolean => ` ${bare} `.includes(` ${phrase} `);
const without = (bare: string, phrase: string): string =>
  ` ${bare} `.replace(` ${phrase} `, ' ').replace(/\s+/g, ' ').trim();

/** The unit that a header names: "Power (kW)", "P_dc [W]", "yield kWh". */
function unitIn(header: string): { quantity: Quantity; unit: string } | null {
  const bracket = /[([]\s*([^)\]]+?)\s*[)\]]/.exec(header)?.[1];
  const last = /(?:^|[\s_])([^\s_]+)$/.exec(header.trim())?.[1];
  for (const text of [bracket, last]) {
    if (text === undefined) continue;
    for (const [quantity, units] of Object.entries(UNITS) as [Quantity, (typeof UNITS)[Quantity]][])
      for (const { unit } of units)
        // capitals tell mW from MW; a lone small letter tells nothing
        if (unit === text || (unit.length > 1 && unit.toLowerCase() === text.toLowerCase() && unit !== 'mV'))
          return { quantity, unit };
  }
  return null;
}

interface Name {
  bare: string;
  subject: Subject;
}
function namesOf(known: KnownSubjects): Name[] {
  const names: Name[] = known.strings.map((s) => ({
    bare: bareHeader(s.name),
    subject: { kind: 'string', string: s.name },
  }));
  for (const v of known.inverters) {
    names.push({ bare: bareHeader(v.name), subject: { kind: 'inverter', inverter: v.name } });
    for (const input of v.inputs)
      for (const text of [`${v.name}/${input}`, `${v.name} input ${input}`, `${v.name} mppt ${input}`])
        names.push({ bare: bareHeader(text), subject: { kind: 'input', inverter: v.name, input } });
  }
  // the longest name that fits is the one that is meant: "Inverter 1 input 2" before "Inverter 1"
  return names.filter((n) => n.bare !== '').sort((a, b) => b.bare.length - a.bare.length);
}

function quantityIn(bare: string, header: string): { quantity: Quantity; unit: string } | null {
  const named = unitIn(header);
  const said = QUANTITY_WORDS.find(([, list]) => list.some((w) => w.length > 1 && has(bare, w)));
  const short = QUANTITY_WORDS.find(([, list]) => list.some((w) => w.length === 1 && bare === w));
  if (named && (!said || said[0] === named.quantity)) return named;
  const quantity = said?.[0] ?? short?.[0];
  return quantity ? { quantity, unit: UNITS[quantity][0].unit } : null;
}

function useOf(header: string, names: readonly Name[]): ColumnUse {
  const bare = bareHeader(header);
  const place = PLACES.find(([, list]) => list.includes(bare));
  if (place) return { as: place[0] };
  const name = names.find((n) => has(bare, n.bare));
  const found = quantityIn(name ? without(bare, name.bare) : bare, header);
  if (found) return { as: found.quantity, unit: found.unit, of: name?.subject ?? null };
  const begins = PLACES.find(([, list]) => list.some((w) => w.length > 3 && bare.startsWith(`${w} `)));
  return begins ? { as: begins[0] } : { as: 'nothing' };
}

/**
 * A first layout of a file. `headers`: its first row, or empty texts where it has none; `samples`: rows of values.
 * Times are read by the clock of the site unless they name a zone.
 */
export function guessLayout(
  headers: readonly string[],
  samples: readonly (readonly string[])[],
  known: KnownSubjects,
  hasHeader: boolean,
  timeZone: string,
): Layout {
  const names = namesOf(known);
  const columns = headers.map((header) => useOf(header, names));
  const values = (i: number) => samples.map((row) => row[i] ?? '').filter((v) => v.trim() !== '');
  const mostly = (i: number, test: (text: string) => boolean) => {
    const filled = values(i);
    return filled.length > 0 && filled.filter(test).length >= filled.length * 0.8;
  };
  // one time, one date, one clock; a column that is called so and holds something else is none
  const taken = new Set<string>();
  columns.forEach((use, i) => {
    if (use.as !== 'at' && use.as !== 'date' && use.as !== 'clock') return;
    let as: PlaceColumn = use.as;
    if (as === 'clock' && mostly(i, looksLikeTime)) as = 'at';
    if (as === 'date' && mostly(i, (t) => /\d:\d\d/.test(t))) as = 'at';
    if (as === 'at' && mostly(i, looksLikeClock)) as = 'clock';
    columns[i] = taken.has(as) ? { as: 'nothing' } : { as };
    taken.add(as);
  });
  if (!taken.has('at') && !taken.has('date')) {
    const i = headers.findIndex((_, n) => columns[n]?.as === 'nothing' && mostly(n, looksLikeTime));
    // "Time" alone, whatever stands in it: the cells then say what is wrong
    const clock = columns.findIndex((c) => c.as === 'clock');
    if (i >= 0) columns[i] = { as: 'at' };
    else if (clock >= 0) columns[clock] = { as: 'at' };
  }
  const times = columns.flatMap((use, i) => (use.as === 'at' || use.as === 'date' ? values(i) : []));
  const orders = new Set(times.map(saysDayFirst).filter((order) => order !== null));
  const figures = columns.flatMap((use, i) => ('unit' in use ? values(i) : []));
  return {
    columns,
    hasHeader,
    timeZone: /utc|gmt/i.test(headers[columns.findIndex((c) => c.as === 'at')] ?? '') ? 'UTC' : timeZone,
    dayFirst: orders.size === 1 ? ([...orders][0] ?? null) : null,
    decimalMark: decimalMarkOf(figures),
  };
}

/** Whether a first row is a header: none of its cells is a time, and not all are figures. */
export const looksLikeHeader = (row: readonly string[]): boolean =>
  !row.some((cell) => looksLikeTime(cell)) && row.some((cell) => /\p{L}/u.test(cell));
