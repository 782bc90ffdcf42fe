import { tableDecode } from '../../words/table-file';
/** Bytes of a spreadsheet's export as text. */

export const ENCODINGS = ['utf-8', 'utf-16le', 'utf-16be', 'windows-1252'] as const;
export type Encoding = (typeof ENCODINGS)[number];
export const ENCODING_NAMES: Record<Encoding, string> = {
  'utf-8': 'UTF-8',
  'utf-16le': 'UTF-16',
  'utf-16be': tableDecode.utf16BigEndian,
  'windows-1252': tableDecode.windows1252WesternEuropean,
};

/** What a file that is no text begins with, and what to do about it. */
const NO_TEXT: readonly { starts: readonly number[]; what: string }[] = [
  { starts: [0x50, 0x4b, 0x03, 0x04], what: tableDecode.aSpreadsheetFileSuch },
  { starts: [0xd0, 0xcf, 0x11, 0xe0], what: tableDecode.aSpreadsheetFileOf },
  { starts: [0x25, 0x50, 0x44, 0x46], what: tableDecode.aPdf },
  { starts: [0xff, 0xd8, 0xff], what: tableDecode.aPhoto },
  { starts: [0x89, 0x50, 0x4e, 0x47], what: tableDecode.aPicture },
];

export type Decoded = { text: string; encoding: Encoding } | { fault: string };

/** Bytes 1 to 31 that no text has, tab and line ends aside. */
const isControl = (byte: number): boolean => byte < 9 || (byte > 13 && byte < 32 && byte !== 27);

/** UTF-16 without a mark: every second byte of Western text is zero. */
function evenZeros(bytes: Uint8Array): Encoding | null {
  const some = bytes.subarray(0, 2000);
  let even = 0;
  let odd = 0;
  some.forEach((b, i) => {
    if (b === 0)
      if (i % 2 === 0) even++;
      else odd++;
  });
  const half = some.length / 2;
  if (odd > half * 0.4 && even < half * 0.05) return 'utf-16le';
  if (even > half * 0.4 && odd < half * 0.05) return 'utf-16be';
  return null;
}

function encodingOf(bytes: Uint8Array): Encoding | null {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  const wide = evenZeros(bytes);
  if (wide) return wide;
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(bytes);
    return 'utf-8';
  } catch {
    // no UTF-8: then what spreadsheets write who know only Western European letters
    return bytes.subarray(0, 4000).some(isControl) ? null : 'windows-1252';
  }
}

/** The text of a file: by its mark, else by what its bytes can be. Files that are no text are named. */
export function decode(bytes: Uint8Array): Decoded {
  const kind = NO_TEXT.find((k) => k.starts.every((b, i) => bytes[i] === b));
  if (kind)
    return {
      fault: tableDecode.thisIsSaveThe(kind.what),
    };
  const encoding = encodingOf(bytes);
  const text = encoding && new TextDecoder(encoding).decode(bytes).replace(/^\ufeff/, '');
  if (!encoding || text === null || text.includes('\0'))
    return {
      fault: tableDecode.thisFileIsNo,
    };
  return { text, encoding };
}
