/** A unit's serial as people type, scan and paste it. */
import { serialSaid } from '../../../words/domain-import';

export type ReadSerial =
  | { kind: 'serial'; serial: string }
  | { kind: 'empty' }
  /** `suggestion` is what was probably meant; a person decides. */
  | { kind: 'fault'; message: string; remedy: string; suggestion: string | null };

const SERIAL = /^[A-Z0-9][A-Z0-9-]{3,31}$/;
/** Marks that stand where a dash belongs. */
const DASHES = /[\u2010-\u2015\u2212_.:/\\]/g;
/** What cannot be seen but comes along from scanners, chats and spreadsheets. */
const INVISIBLE = /\p{Cf}/gu;
const CONTROL = /\p{Cc}/gu;
const WORDS_FOR_NONE = new Set(['-', '–', '—', 'N/A', 'NA', 'NONE', 'NULL', 'TBD', '?', '#N/A']);

/**
 * The serial in `text`: blanks around it, case and invisible marks are forgiven; words for "none" count as empty. What is
 * no serial comes back with the reason, the remedy and, where one is plain, a suggestion. Serials are 4 to 32
 * characters: letters A–Z, digits and dashes, the first no dash.
 */
export function readSerial(text: string): ReadSerial {
  // an apostrophe before it is how spreadsheets keep a text a text
  const bare = text
    .replace(INVISIBLE, '')
    .replace(CONTROL, ' ')
    .trim()
    .replace(/^'/, '')
    .trim()
    .toUpperCase();
  if (bare === '' || WORDS_FOR_NONE.has(bare)) return { kind: 'empty' };
  if (SERIAL.test(bare)) return { kind: 'serial', serial: bare };
  const fault = (message: string, remedy: string, suggestion: string | null = null): ReadSerial => ({
    kind: 'fault',
    message,
    remedy,
    suggestion: suggestion !== null && SERIAL.test(suggestion) ? suggestion : null,
  });
  if (/^\d(?:[.,]\d+)?E\+?\d+$/.test(bare))
    return fault(serialSaid.turnedNumber(bare), serialSaid.turnedNumberRemedy);
  if (/^\d+[.,]0+$/.test(bare))
    return fault(serialSaid.decimals(bare), serialSaid.decimalsRemedy, bare.replace(/[.,]0+$/, ''));
  if (/^HTTPS?:\/\//.test(bare)) {
    const last = bare.split(/[/?=&#]/).findLast((part) => SERIAL.test(part) && /\d/.test(part));
    return fault(serialSaid.address, serialSaid.addressRemedy, last ?? null);
  }
  const joined = bare.replace(/\s+/g, '').replace(DASHES, '-').replace(/^-+/, '');
  const strange = [...new Set(bare.match(/[^A-Z0-9\s-]/gu) ?? [])].slice(0, 4).join(' ');
  if (joined.length > 32) return fault(serialSaid.long(joined.length), serialSaid.longRemedy);
  if (joined.replace(/[^A-Z0-9-]/g, '').length < 4)
    return fault(serialSaid.short(bare), serialSaid.shortRemedy);
  if (/\s/.test(bare) && strange === '') return fault(serialSaid.blanks, serialSaid.blanksRemedy, joined);
  if (strange !== '') return fault(serialSaid.strange(strange), serialSaid.strangeRemedy, joined);
  return fault(serialSaid.noSerial(bare), serialSaid.noSerialRemedy, joined);
}
