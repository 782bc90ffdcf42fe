import { readFile } from 'node:fs/promises';
import sharp from 'sharp';

/** A logo made anew: nothing of the file but its pixels is kept. */

const MOST = { width: 640, height: 240 };
const PIXELS_MAX = 40_000_000;

/** @throws Error that says in words what is wrong with the picture */
export async function readLogo(path: string): Promise<{ data: Buffer; width: number; height: number }> {
  const { data, info } = await sharp(await readFile(path), { limitInputPixels: PIXELS_MAX, failOn: 'error' })
    .rotate()
    .resize({ ...MOST, fit: 'inside', withoutEnlargement: true })
    .png({ compressionLevel: 9 })
    .toBuffer({ resolveWithObject: true });
  return { data, width: info.width, height: info.height };
}
