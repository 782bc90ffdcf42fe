/** Which columns of a file mean what: guessed from their headers and contents, decided by the person. */
import { COLUMN_LABELS } from '../../../words/domain-import';
import { readNumber } from './number';
import { readSerial } from './serial';

export const IMPORT_COLUMNS = [
  'string',
  'position',
  'serial',
  'unitType',
  'moduleType',
  'plane',
  'inverter',
  'input',
  'zone',
  'logger',
  'transmitters',
  'roofX',
  'roofY',
  'roofPlace',
] as const;
export type ImportColumn = (typeof IMPORT_COLUMNS)[number];

/** Without these a row says nothing about the plant. */
export const REQUIRED_COLUMNS: readonly ImportColumn[] = ['string', 'position', 'serial'];

/** Other words for the same, in the languages that drawings come in; compared without case, accents and marks. */
const SYNONYMS: Record<ImportColumn, readonly string[]> = {
  string:
    'string name|string no|string number|string id|string label|strang|strangnummer|chaine|cadena|stringa|str|row|circuit'.split(
      '|',
    ),
  position:
    'pos|position in string|slot|place in string|module no|module number|panel no|panel number|unit no|no in string|index|platz|posicion|posizione|positie|#|nr|no'.split(
      '|',
    ),
  serial:
    'serial number|serial no|serial nr|unit serial|unit serial number|sn|s n|s/n|barcode|bar code|seriennummer|serien nr|numero de serie|no de serie|numero di serie|serienummer|device serial|unit id'.split(
      '|',
    ),
  unitType: 'unit type|type of unit|unit model|electronics|device type|unit'.split('|'),
  moduleType:
    'module type|type of module|module|module model|panel|panel type|panel model|modultyp|modul|pv module'.split(
      '|',
    ),
  plane: 'roof plane|roof face|face|array|orientation|dachflache|orientierung|pan|subarray|sub array'.split(
    '|',
  ),
  inverter: 'inverter name|inverter no|inv|wechselrichter|wr|onduleur|inversor|omvormer'.split('|'),
  input: 'mppt|mpp|tracker|mppt input|inverter input|mpp tracker|input no|eingang|dc input'.split('|'),
  zone: 'shutdown zone|initiator zone|zona|abschaltzone'.split('|'),
  logger: 'logger serial|data logger|datalogger'.split('|'),
  transmitters: 'transmitter|sender|keep alive transmitter|keep-alive'.split('|'),
  roofX: 'x|x m|east|easting|roof x|x (m)|roof x (m)|col x'.split('|'),
  roofY: 'y|y m|north|northing|roof y|y (m)|roof y (m)'.split('|'),
  roofPlace: 'place on the roof|roof place|place|location|where|ort|lage|note|remark'.split('|'),
};

/**
 * Heads of the files that we write. They are read back, so they are the same in every language: each installation reads what
 * another has written.
 */
export const COLUMN_HEADS: Record<ImportColumn, string> = {
  string: 'string',
  position: 'position',
  serial: 'serial',
  unitType: 'unit type',
  moduleType: 'module type',
  plane: 'plane',
  inverter: 'inverter',
  input: 'input',
  zone: 'zone',
  logger: 'logger',
  transmitters: 'transmitters',
  roofX: 'roof x (m)',
  roofY: 'roof y (m)',
  roofPlace: 'place on the roof',
};

/** A header without case, accents, marks and double blanks. */
export const bareHeader = (text: string): string =>
  text
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}#]+/gu, ' ')
    .trim();

const KNOWN = new Map<string, ImportColumn>();
for (const column of IMPORT_COLUMNS)
  for (const word of [COLUMN_HEADS[column], COLUMN_LABELS[column], column, ...SYNONYMS[column]])
    if (!KNOWN.has(bareHeader(word))) KNOWN.set(bareHeader(word), column);
/** The product's own heads and labels win over other people's words, heads over labels. */
const OWN = new Map(
  [COLUMN_LABELS, COLUMN_HEADS].flatMap((of) => IMPORT_COLUMNS.map((c) => [bareHeader(of[c]), c] as const)),
);

/** For each of our columns the index in the file, or null. */
export type ColumnMatch = Record<ImportColumn, number | null>;

export const noMatch = (): ColumnMatch =>
  Object.fromEntries(IMPORT_COLUMNS.map((c) => [c, null])) as ColumnMatch;

/** How much the values look like what the column holds, 0 to 1; null where contents say nothing about it. */
export function fitOf(column: ImportColumn, values: readonly string[]): number | null {
  const filled = values.filter((v) => v.trim() !== '');
  if (filled.length === 0) return null;
  const share = (test: (text: string) => boolean) => filled.filter(test).length / filled.length;
  switch (column) {
    case 'serial':
      return share((v) => readSerial(v).kind === 'serial' && /\d/.test(v));
    case 'position':
      return share((v) => {
        const n = readNumber(v);
        return n.kind === 'number' && Number.isInteger(n.value) && n.value >= 1 && n.value <= 63;
      });
    case 'roofX':
    case 'roofY':
      return share((v) => readNumber(v).kind !== 'fault');
    default:
      return null;
  }
}

/**
 * Guesses the columns from the headers: first our own labels, then synonyms, then headers that begin with one; at last
 * contents, for a serial column under a header that says nothing.
 */
export function matchColumns(
  headers: readonly string[],
  samples: readonly (readonly string[])[],
): ColumnMatch {
  const match = noMatch();
  const taken = new Set<number>();
  const take = (column: ImportColumn | undefined, index: number) => {
    if (!column || match[column] !== null || taken.has(index)) return;
    match[column] = index;
    taken.add(index);
  };
  const bare = headers.map(bareHeader);
  bare.forEach((header, i) => take(OWN.get(header), i));
  bare.forEach((header, i) => take(KNOWN.get(header), i));
  bare.forEach((header, i) => {
    if (taken.has(i) || header.length < 4) return;
    const words = header.split(' ');
    for (let n = words.length - 1; n >= 1; n--) {
      const start = KNOWN.get(words.slice(0, n).join(' '));
      if (start && words.slice(0, n).join(' ').length >= 3) return take(start, i);
    }
  });
  const values = (i: number) => samples.map((row) => row[i] ?? '');
  if (match.serial === null) {
    const best = headers
      .map((_, i) => ({ i, fit: taken.has(i) ? 0 : (fitOf('serial', values(i)) ?? 0) }))
      .sort((a, b) => b.fit - a.fit)[0];
    if (best && best.fit > 0.8) take('serial', best.i);
  }
  return match;
}

/** Whether a first row is a header: most of its cells are words that we know, or nothing in it looks like a serial. */
export function looksLikeHeader(row: readonly string[]): boolean {
  if (row.some((cell) => KNOWN.has(bareHeader(cell)))) return true;
  return !row.some((cell) => readSerial(cell).kind === 'serial' && /\d/.test(cell));
}
