import fc from 'fast-check';
import Papa from 'papaparse';
import { describe, expect, it } from 'vitest';
import { decode } from './decode';
import { parseText, separatorOf } from './parse';
import type { Separator } from './separators';

const utf16 = (text: string, big = false, mark = true): Uint8Array => {
  const units = [
    ...(mark ? ['\ufeff'] : []),
    ...Array.from({ length: text.length }, (_, i) => text[i] ?? ''),
  ];
  return new Uint8Array(
    units.flatMap((c) => {
      const code = c.charCodeAt(0);
      return big ? [code >> 8, code & 255] : [code & 255, code >> 8];
    }),
  );
};
const TEXT = 'Strang;Pos;Seriennummer;Dachfläche\r\nA1;1;UN-0001;Süd\r\n';

describe('the encoding of a file', () => {
  it('is found with and without a mark', () => {
    const utf8 = new TextEncoder().encode(TEXT);
    expect(decode(utf8)).toEqual({ text: TEXT, encoding: 'utf-8' });
    expect(decode(new Uint8Array([0xef, 0xbb, 0xbf, ...utf8]))).toEqual({ text: TEXT, encoding: 'utf-8' });
    expect(decode(utf16(TEXT))).toEqual({ text: TEXT, encoding: 'utf-16le' });
    expect(decode(utf16(TEXT, true))).toEqual({ text: TEXT, encoding: 'utf-16be' });
    expect(decode(utf16(TEXT, false, false))).toEqual({ text: TEXT, encoding: 'utf-16le' });
    const western = new Uint8Array([...TEXT].map((c) => c.charCodeAt(0)));
    expect(decode(western)).toEqual({ text: TEXT, encoding: 'windows-1252' });
  });
  it('of what is no text is refused by name', () => {
    const fault = (...bytes: number[]) => {
      const read = decode(new Uint8Array(bytes));
      return 'fault' in read ? read.fault : '';
    };
    expect(fault(0x50, 0x4b, 3, 4, 20, 0)).toContain('.xlsx');
    expect(fault(0x25, 0x50, 0x44, 0x46, 0x2d)).toContain('a PDF');
    expect(fault(0xff, 0xfe + 1, 0xff, 1, 2, 3, 200)).toContain('no text');
  });
  it('gives any text of the letters it knows back', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^[A-Za-zäöüéèß;,\t\n0-9 ]{1,80}$/), fc.boolean(), (text, big) => {
        expect(decode(utf16(text, big))).toMatchObject({ text });
        expect(decode(new TextEncoder().encode(text))).toMatchObject({ text });
      }),
    );
  });
});

describe('a text with separators', () => {
  it('tells its separator by its header', () => {
    expect(separatorOf('a;b;c\n1,5;2,5;3,5')).toBe(';');
    expect(separatorOf('\n\na\tb\n1,5\t2')).toBe('\t');
    expect(separatorOf('"a;b",c,d\n')).toBe(',');
    expect(separatorOf('alone\n1')).toBe('\t');
  });
  it('keeps quoted separators, quotes and line breaks, and counts lines as an editor does', () => {
    const parsed = parseText('string,note,serial\r\nA1,"on the\r\nleft, ""low""",UN-1\r\n\r\nA2,,UN-2\r\n');
    expect(parsed.rows).toEqual([
      ['string', 'note', 'serial'],
      ['A1', 'on the\r\nleft, "low"', 'UN-1'],
      ['A2', '', 'UN-2'],
    ]);
    expect(parsed.lines).toEqual([1, 2, 5]);
    expect(parsed.emptyLines).toBe(1);
    expect(parsed.faults).toEqual([]);
  });
  it('says where a quote was never closed', () => {
    const parsed = parseText('a,b\n1,"2\n3,4\n');
    expect(parsed.faults).toEqual([
      { line: 2, message: 'a quote is opened and never closed: the rest of the file would be one cell' },
    ]);
  });
  it('stops at a size that a browser can show', () => {
    const parsed = parseText(`a,b\n${'A1,1\n'.repeat(25_000)}`);
    expect(parsed.faults.map((f) => f.message)).toEqual([
      'the file has more than 20,000 rows: import it in parts',
    ]);
  });
  it('skips the line that names the separator', () => {
    expect(parseText('sep=;\r\na;b\r\n1;2\r\n')).toMatchObject({ separator: ';', lines: [2, 3] });
  });
  it('reads what a writer of such files has written, with the line of each row', () => {
    const cell = fc.stringMatching(/^[A-Za-z0-9 ,;"\n-]{0,12}$/);
    fc.assert(
      fc.property(
        fc.array(fc.array(cell, { minLength: 3, maxLength: 3 }), { minLength: 1, maxLength: 10 }),
        fc.constantFrom<Separator>('\t', ';', ','),
        (rows, separator) => {
          const text = Papa.unparse(rows, { delimiter: separator, newline: '\r\n' });
          const filled = rows.filter((r) => r.some((c) => c.trim() !== ''));
          const parsed = parseText(text, separator);
          expect(parsed.rows).toEqual(filled);
          let line = 1;
          const lines = rows.flatMap((r) => {
            const own = line;
            line += 1 + r.join('').split('\n').length - 1;
            return r.some((c) => c.trim() !== '') ? [own] : [];
          });
          expect(parsed.lines).toEqual(lines);
        },
      ),
    );
  });
});
