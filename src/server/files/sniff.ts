import { fileKinds } from '../../words/refusals';
/** What a file is by its first bytes. Its name and what a browser says of it are not asked. */

export const FILE_KINDS = ['jpeg', 'png', 'webp', 'pdf'] as const;
export type FileKind = (typeof FILE_KINDS)[number];

export type Sniffed =
  | { kind: FileKind; fault: null }
  | {
      kind: null;
      /** What it is, and what to do. */
      fault: string;
    };

/** Bytes that decide. */
export const SNIFF_BYTES = 512;

const startsWith = (head: Uint8Array, bytes: readonly number[], from = 0): boolean =>
  head.length >= from + bytes.length && bytes.every((b, i) => head[from + i] === b);
const ascii = (head: Uint8Array, from: number, to: number): string =>
  String.fromCharCode(...head.subarray(from, to));

const CHOOSE = fileKinds.sendPicture;
/** Boxes of ISO base media files by their brand (ISO/IEC 14496-12; HEIF: ISO/IEC 23008-12). */
const HEIC_BRANDS = ['heic', 'heix', 'hevc', 'heim', 'heis', 'hevm', 'mif1', 'msf1'];

/** Signatures: JPEG (ITU-T T.81), PNG (RFC 2083), WebP (RIFF), PDF (ISO 32000), the rest as far as they are common. */
export function sniff(head: Uint8Array): Sniffed {
  const is = (kind: FileKind): Sniffed => ({ kind, fault: null });
  const no = (what: string, remedy = CHOOSE): Sniffed => ({ kind: null, fault: `${what} ${remedy}` });
  if (head.length === 0) return no(fileKinds.empty);
  if (startsWith(head, [0xff, 0xd8, 0xff])) return is('jpeg');
  if (startsWith(head, [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])) return is('png');
  if (ascii(head, 0, 4) === 'RIFF' && ascii(head, 8, 12) === 'WEBP') return is('webp');
  if (ascii(head, 0, 5) === '%PDF-') return is('pdf');
  if (ascii(head, 4, 8) === 'ftyp') {
    const brand = ascii(head, 8, 12);
    if (HEIC_BRANDS.includes(brand)) return no(fileKinds.heic, fileKinds.heicRemedy);
    if (brand === 'avif' || brand === 'avis') return no(fileKinds.avif);
    return no(fileKinds.video, fileKinds.videoRemedy);
  }
  if (ascii(head, 0, 4) === 'GIF8') return no(fileKinds.gif);
  if (startsWith(head, [0x49, 0x49, 0x2a, 0x00]) || startsWith(head, [0x4d, 0x4d, 0x00, 0x2a]))
    return no(fileKinds.tiff);
  if (ascii(head, 0, 2) === 'BM') return no(fileKinds.bitmap);
  const text = ascii(head, 0, SNIFF_BYTES)
    .replace(/^\u00ef\u00bb\u00bf/, '')
    .trimStart()
    .toLowerCase();
  if (text.startsWith('<svg') || (text.startsWith('<?xml') && text.includes('<svg')))
    return no(fileKinds.svg);
  if (/^(<!doctype|<html|<head|<body|<script|<!--|<\?xml)/.test(text)) return no(fileKinds.webPage);
  if (startsWith(head, [0x50, 0x4b, 0x03, 0x04])) return no(fileKinds.archive);
  return no(fileKinds.unknown);
}
