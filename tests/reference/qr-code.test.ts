import fs from 'node:fs';
import { createRequire } from 'node:module';
import { createElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import sharp from 'sharp';
import { prepareZXingModule, readBarcodes } from 'zxing-wasm/reader';
import { expect, it } from 'vitest';
import { QrCode } from '../../src/components/capture/OpenOnPhone';

/** The code that opens the phone's page, read back by a decoder that we did not write (ZXing's C++ as WebAssembly). */
it('a code is read back as the address that it was made of', async () => {
  const wasm = createRequire(import.meta.url).resolve('zxing-wasm/reader/zxing_reader.wasm');
  prepareZXingModule({ overrides: { wasmBinary: new Uint8Array(fs.readFileSync(wasm)).buffer } });
  const address = 'https://roofs.example/capture/0b0f6a53-6f5e-4a55-9d6b-2c0a3a0c1f11';
  const svg = renderToStaticMarkup(createElement(QrCode, { text: address, label: 'Code', size: 320 }));
  const drawn = svg.replace('<svg ', '<svg xmlns="http://www.w3.org/2000/svg" ');
  const png = await sharp(Buffer.from(drawn)).png().toBuffer();
  const [found] = await readBarcodes(new Uint8Array(png), { formats: ['QRCode'] });
  expect(found?.text).toBe(address);
});
