/** A unit's serial as people type, scan and paste it. */

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
    return fault(
      `"${bare}" is a serial that the spreadsheet has turned into a number`,
      'Its digits are lost. Set the column to text in the spreadsheet, enter the serials again and export once more.',
    );
  if (/^\d+[.,]0+$/.test(bare))
    return fault(
      `"${bare}" has decimals`,
      'Set the column to text in the spreadsheet.',
      bare.replace(/[.,]0+$/, ''),
    );
  if (/^HTTPS?:\/\//.test(bare)) {
    const last = bare.split(/[/?=&#]/).findLast((part) => SERIAL.test(part) && /\d/.test(part));
    return fault(
      'it is a web address',
      'The code on the label carries an address; type the serial beside it.',
      last ?? null,
    );
  }
  const joined = bare.replace(/\s+/g, '').replace(DASHES, '-').replace(/^-+/, '');
  const strange = [...new Set(bare.match(/[^A-Z0-9\s-]/gu) ?? [])].slice(0, 4).join(' ');
  if (joined.length > 32)
    return fault(
      `it has ${joined.length} characters`,
      'Serials have 4 to 32. Is this one serial, and the right column?',
    );
  if (joined.replace(/[^A-Z0-9-]/g, '').length < 4)
    return fault(`"${bare}" is too short`, 'Serials have 4 to 32 letters, digits and dashes.');
  if (/\s/.test(bare) && strange === '')
    return fault('it has blanks in it', 'Type it without blanks, or check that it is one serial.', joined);
  if (strange !== '')
    return fault(
      `it has ${strange} in it`,
      'Serials are letters A to Z, digits and dashes. Compare with the label on the unit.',
      joined,
    );
  return fault(
    `"${bare}" is no serial`,
    'Serials are 4 to 32 letters, digits and dashes and begin with a letter or digit.',
    joined,
  );
}
