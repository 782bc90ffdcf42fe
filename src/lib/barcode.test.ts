import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import bwipjs from 'bwip-js/node';
import sharp from 'sharp';
import { beforeAll, describe, expect, it } from 'vitest';
import { shippedDecoder, type Decoder } from './barcode';

let decoder: Decoder;
beforeAll(async () => {
  const file = await readFile(createRequire(import.meta.url).resolve('zxing-wasm/reader/zxing_reader.wasm'));
  decoder = await shippedDecoder(file.buffer.slice(file.byteOffset, file.byteOffset + file.byteLength));
});

/** A drawn code on a sheet, as a camera would see it: turned a little, on grey, with noise around it. */
async function photo(bcid: string, text: string, turn = 0): Promise<ImageData> {
  const code = await bwipjs.toBuffer({ bcid, text, scale: 4, ...(bcid === 'code128' ? { height: 14 } : {}) });
  const { data, info } = await sharp(code)
    .flatten({ background: '#ffffff' })
    .extend({ top: 40, bottom: 40, left: 40, right: 40, background: '#ffffff' })
    .rotate(turn, { background: '#b9b9b0' })
    .extend({ top: 60, bottom: 60, left: 60, right: 60, background: '#b9b9b0' })
    .blur(0.6)
    .ensureAlpha()
    .raw()
    .toBuffer({ resolveWithObject: true });
  // the decoder asks for the three members of ImageData, which Node has not
  return {
    data: new Uint8ClampedArray(data),
    width: info.width,
    height: info.height,
  } as unknown as ImageData;
}

describe('the decoder that we ship', () => {
  it.each([
    ['code128', 'UN-0471-1A'],
    ['datamatrix', 'UN-0471-1B'],
    ['qrcode', 'https://units.example/u?sn=UN-0471-1C'],
  ])('reads %s', async (bcid, text) => {
    expect(await decoder.read(await photo(bcid, text))).toBe(text);
    expect(await decoder.read(await photo(bcid, text, 7))).toBe(text);
  });
  it('keeps the field ends of a GS1 data matrix', async () => {
    const read = await decoder.read(await photo('gs1datamatrix', '(01)04012345678901(10)LOT7(21)UN4711'));
    expect(read).toContain('UN4711');
    expect(read).toContain('\u001d');
  });
  it('finds none where there is none', async () => {
    const { width, height } = { width: 320, height: 240 };
    const data = new Uint8ClampedArray(width * height * 4).map((_, i) =>
      i % 4 === 3 ? 255 : (i * 31) % 200,
    );
    expect(await decoder.read({ data, width, height } as unknown as ImageData)).toBeNull();
  });
});
