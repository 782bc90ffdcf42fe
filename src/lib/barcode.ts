/** Codes on labels, read by the browser where it can and else by a decoder that we ship. */
import { cameraSaid } from '../words/browser';

/** What the labels of units carry. */
const FORMATS = ['code_128', 'data_matrix', 'qr_code'] as const;

/** Reads the first code in a picture; null: there is none. */
export type ReadCode = (picture: ImageData) => Promise<string | null>;
export interface Decoder {
  read: ReadCode;
  /** Who reads: for the person to know why the first time takes a moment. */
  by: 'browser' | 'shipped';
}

/** The Barcode Detection API, as far as it is used; not in TypeScript's own types. */
interface Detector {
  detect: (picture: ImageData) => Promise<{ rawValue: string }[]>;
}
interface DetectorKind {
  new (options: { formats: readonly string[] }): Detector;
  getSupportedFormats: () => Promise<string[]>;
}

async function browserDecoder(): Promise<Decoder | null> {
  const kind = (globalThis as { BarcodeDetector?: DetectorKind }).BarcodeDetector;
  if (!kind) return null;
  try {
    const known = await kind.getSupportedFormats();
    if (!FORMATS.every((f) => known.includes(f))) return null;
    const detector = new kind({ formats: FORMATS });
    // some browsers have the name and no service behind it: that shows at the first picture only
    await detector.detect(new ImageData(16, 16));
    return { by: 'browser', read: async (picture) => (await detector.detect(picture))[0]?.rawValue ?? null };
  } catch {
    return null; // a browser that promises and does not keep: ours reads instead
  }
}

/**
 * The decoder that we ship (WebAssembly), loaded only when it is needed. `wasm`: its program, where it is not to be
 * fetched from our own server.
 */
export async function shippedDecoder(wasm?: ArrayBuffer): Promise<Decoder> {
  const { prepareZXingModule, readBarcodes } = await import('zxing-wasm/reader');
  if (wasm) prepareZXingModule({ overrides: { wasmBinary: wasm } });
  else {
    const { default: address } = await import('zxing-wasm/reader/zxing_reader.wasm?url');
    prepareZXingModule({ overrides: { locateFile: () => address } });
  }
  return {
    by: 'shipped',
    read: async (picture) => {
      const found = await readBarcodes(picture, {
        formats: ['Code128', 'DataMatrix', 'QRCode'],
        tryHarder: true,
        maxNumberOfSymbols: 1,
        textMode: 'Plain',
      });
      return found[0]?.text ?? null;
    },
  };
}

/** The best decoder that there is here. */
export const openDecoder = async (): Promise<Decoder> => (await browserDecoder()) ?? (await shippedDecoder());

/** Why the camera can't be used here, in words; null: it can be tried. */
export function cameraHindrance(): string | null {
  if (!window.isSecureContext) return cameraSaid.insecure;
  const { mediaDevices } = navigator as { mediaDevices?: MediaDevices };
  if (typeof mediaDevices?.getUserMedia !== 'function') return cameraSaid.none;
  return null;
}
