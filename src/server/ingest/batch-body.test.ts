import { gzipSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { BATCH_MAX_BYTES, BATCH_UNPACKED_MAX_BYTES } from '../../schemas/lists-and-limits';
import { messagesOf, readBatchBody } from './batch-body';

const request = (body: BodyInit | null, headers: Record<string, string> = {}) =>
  new Request('http://here/api/v1/ingest', { method: 'POST', body, headers });
const all = (text: string, type: string) => [...messagesOf(Buffer.from(text), type)];

describe('the body of a batch', () => {
  it('is the same packed and plain', async () => {
    const text = '{"type":"hello"}\n';
    const packed = request(new Uint8Array(gzipSync(text)), { 'content-encoding': 'gzip' });
    expect(String(await readBatchBody(packed))).toBe(text);
    expect(String(await readBatchBody(request(text)))).toBe(text);
  });
  it('stops unpacking at the bound: 40 MB of nothing in a small body', async () => {
    const bomb = gzipSync(Buffer.alloc(40 * 1024 * 1024));
    expect(bomb.length).toBeLessThan(BATCH_MAX_BYTES);
    await expect(
      readBatchBody(request(new Uint8Array(bomb), { 'content-encoding': 'gzip' })),
    ).rejects.toMatchObject({
      kind: 'too_large',
      message: expect.stringContaining(String(BATCH_UNPACKED_MAX_BYTES)) as string,
    });
  });
  it('is refused where it is larger than its bound, broken, or packed in another way', async () => {
    await expect(readBatchBody(request('x'.repeat(BATCH_MAX_BYTES + 1)))).rejects.toMatchObject({
      kind: 'too_large',
    });
    await expect(
      readBatchBody(request('no gzip at all', { 'content-encoding': 'gzip' })),
    ).rejects.toMatchObject({
      kind: 'invalid',
      message: expect.stringContaining('not gzip') as string,
    });
    const cut = new Uint8Array(gzipSync('{"type":"hello"}').subarray(0, 20));
    await expect(readBatchBody(request(cut, { 'content-encoding': 'gzip' }))).rejects.toMatchObject({
      kind: 'invalid',
    });
    await expect(readBatchBody(request('x', { 'content-encoding': 'br' }))).rejects.toMatchObject({
      detail: { fields: [{ field: 'content-encoding' }] },
    });
    await expect(readBatchBody(request(null))).rejects.toMatchObject({ kind: 'invalid' });
  });
});

describe('its messages', () => {
  it('are one a line in NDJSON; blank lines and a line that is no JSON are told apart', () => {
    const read = all('{"a":1}\r\n\n{"b":2}\nno json\n{"c":3}', 'application/x-ndjson; charset=utf-8');
    expect(read.map((m) => (m.ok ? m.value : m.refused.reason))).toEqual([
      { a: 1 },
      { b: 2 },
      expect.stringMatching(/^is not JSON/),
      { c: 3 },
    ]);
  });
  it('are one or a list in JSON', () => {
    expect(all('{"a":1}', 'application/json')).toEqual([{ ok: true, value: { a: 1 } }]);
    expect(all('[{"a":1},7]', 'application/json')).toEqual([
      { ok: true, value: { a: 1 } },
      expect.objectContaining({ ok: false }),
    ]);
  });
  it('are not read under a type that is not known, nor out of broken JSON', () => {
    expect(() => messagesOf(Buffer.from('{}'), null)).toThrow('send application/json');
    expect(() => all('{"a":', 'application/json')).toThrow('is not JSON');
    expect(() => all('{}\n'.repeat(2001), 'application/x-ndjson')).toThrow('more than 2000');
  });
});
