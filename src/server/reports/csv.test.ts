import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { BYTE_ORDER_MARK, csvField, csvResponse, csvText, type Cell } from './csv';

/** A reader written from the grammar in RFC 4180, section 2, to check the writer against. */
function read(text: string): string[][] {
  const records: string[][] = [];
  let record: string[] = [];
  let field = '';
  let quoted = false;
  for (let i = 0; i < text.length; i++) {
    const c = text[i];
    if (quoted) {
      if (c === '"' && text[i + 1] === '"') {
        field += '"';
        i++;
      } else if (c === '"') quoted = false;
      else field += c;
    } else if (c === '"' && field === '') quoted = true;
    else if (c === ',') {
      record.push(field);
      field = '';
    } else if (c === '\r' && text[i + 1] === '\n') {
      records.push([...record, field]);
      record = [];
      field = '';
      i++;
    } else field += c;
  }
  return records;
}

describe('csv', () => {
  it('quotes as the examples of RFC 4180 section 2 do', () => {
    // rules 5 to 7: "aaa","b CRLF bb","ccc" and "aaa","b""bb","ccc"
    expect(csvField('aaa')).toBe('aaa');
    expect(csvField('b\r\nbb')).toBe('"b\r\nbb"');
    expect(csvField('b"bb')).toBe('"b""bb"');
    expect(csvField('a,b')).toBe('"a,b"');
  });

  it('ends every record with CRLF, the header first', () => {
    const text = csvText(
      [
        { header: 'site', value: (r: { n: string; v: number | null }) => r.n },
        { header: 'voltage (V)', value: (r) => r.v },
      ],
      [
        { n: 'Depot', v: 8.4 },
        { n: 'Hall', v: null },
      ],
    );
    expect(text).toBe(`${BYTE_ORDER_MARK}site,voltage (V)\r\nDepot,8.4\r\nHall,\r\n`);
  });

  it('defuses what a spreadsheet would run, and leaves numbers alone', () => {
    // the starts that OWASP's "CSV Injection" page lists
    for (const start of ['=', '+', '-', '@', '\t', '\r', '＝', '＋', '－', '＠'])
      expect(csvField(`${start}1+1`).replace(/^"/, '').startsWith("'")).toBe(true);
    expect(csvField('=HYPERLINK("http://x","y")')).toBe(`"'=HYPERLINK(""http://x"",""y"")"`);
    expect(csvField('  =1')).toContain("'");
    expect(csvField(-0.5)).toBe('-0.5');
    expect(csvField('B-3')).toBe('B-3');
  });

  it('writes times in UTC, yes and no, and nothing for what is not known', () => {
    expect(csvField(new Date(Date.UTC(2026, 5, 1, 12)))).toBe('2026-06-01T12:00:00.000Z');
    expect(csvField(new Date(NaN))).toBe('');
    expect(csvField(true)).toBe('yes');
    expect([csvField(null), csvField(undefined), csvField(NaN), csvField(Infinity)]).toEqual([
      '',
      '',
      '',
      '',
    ]);
  });

  it('reads back what was written, whatever the text holds', () => {
    const cell = fc.oneof(fc.string(), fc.stringMatching(/^[=+@",\r\n a-z-]*$/));
    fc.assert(
      fc.property(fc.array(fc.tuple(cell, cell)), (rows) => {
        const text = csvText<[Cell, Cell]>(
          [
            { header: 'a', value: (r) => r[0] },
            { header: 'b', value: (r) => r[1] },
          ],
          rows,
        );
        const back = read(text.slice(1)).slice(1);
        expect(back).toHaveLength(rows.length);
        rows.forEach((row, i) => {
          row.forEach((value, j) => {
            const got = back[i]?.[j] ?? '';
            expect(got === value || got === `'${value}`).toBe(true);
            expect(got).not.toMatch(/^\s*[=+\-@]/);
          });
        });
      }),
    );
  });

  it('names the file so that a header and a file system can carry it', async () => {
    const response = csvResponse('Zürich "North"\r\n/roof', [{ header: 'a', value: () => 1 }], [1]);
    expect(response.headers.get('content-disposition')).toBe('attachment; filename="Zurich-North-roof.csv"');
    expect(response.headers.get('content-type')).toContain('text/csv');
    expect(await response.text()).toContain('a\r\n1\r\n');
  });
});
