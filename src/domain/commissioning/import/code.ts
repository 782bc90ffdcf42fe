import { readSerial } from './serial';

/** What stands in a bar code or matrix code on a label. */

/** FNC1 as readers give it: the end of a field of variable length (GS1 General Specifications, element strings). */
const GROUP_END = '\u001d';
/** Fields of fixed length that commonly stand before the serial: (01) article number, (11) made on, (17) use by. */
const FIXED: Record<string, number> = { '01': 14, '11': 6, '13': 6, '17': 6 };
/** (21): serial. */
const SERIAL_FIELD = '21';
const NAMED =
  /(?:^|[\s;,|&?])(?:S\/?N|SERIAL(?:[\s_-]*(?:NO|NR|NUMBER))?)\.?\s*[:#=]\s*([A-Z0-9-]{4,32})(?=$|[\s;,|&])/i;

/** The serial of a GS1 element string; null where it is none or has none. */
function gs1Serial(text: string): string | null {
  const bare = text.replace(/^\]\w\d/, '');
  const written = /^\(\d{2,4}\)/.test(bare) ? /\(21\)([^()]+)/.exec(bare)?.[1] : undefined;
  if (written !== undefined) return written; // as people write it, and some readers
  if (!bare.includes(GROUP_END) && !/^01\d{14}(?:1[137]\d{6})*21/.test(bare)) return null;
  let rest = bare.startsWith(GROUP_END) ? bare.slice(1) : bare;
  while (rest.length > 2) {
    const field = rest.slice(0, 2);
    const length = FIXED[field];
    if (length !== undefined) {
      rest = rest.slice(2 + length).replace(new RegExp(`^${GROUP_END}`), '');
      continue;
    }
    const end = rest.indexOf(GROUP_END);
    const value = rest.slice(2, end === -1 ? undefined : end);
    if (field === SERIAL_FIELD) return value;
    if (end === -1) return null;
    rest = rest.slice(end + 1);
  }
  return null;
}

/**
 * What of a code's text is the serial: of a GS1 element string its field (21), of a text with names the value after
 * "SN" or "Serial", of an address its last part, else all of it. The person sees it before it is kept.
 */
export function serialOfCode(text: string): string {
  const field = gs1Serial(text);
  if (field !== null) return field;
  const named = NAMED.exec(text)?.[1];
  if (named !== undefined) return named.toUpperCase();
  const read = readSerial(text);
  if (read.kind === 'serial') return read.serial;
  return read.kind === 'fault' && read.suggestion !== null && /^https?:/i.test(text.trim())
    ? read.suggestion
    : text.trim();
}
