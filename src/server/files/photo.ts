import sharp from 'sharp';
import { PHOTO_MAX_PIXELS, THUMBNAIL_PIXELS } from '../../schemas/api/attachments';
import { AppError } from '../errors';
import { photoRefusals } from '../../words/refusals';

/** A photo as it is kept: turned upright, made smaller, and free of what the camera wrote into it. */
export interface Photo {
  data: Buffer;
  width: number;
  height: number;
  thumbnail: Buffer;
}

/** Pixels that a picture may unpack to: a few kilobytes can claim any number. */
const PIXELS_MAX = 120_000_000;
const SECONDS_MAX = 30;
/** Pictures worked on at once; one of 50 megapixels takes about 150 MB. */
const AT_ONCE = 2;

// one picture never takes the whole machine from readings that come in
sharp.concurrency(1);
sharp.cache(false);

let working = 0;
const waiting: (() => void)[] = [];
async function inTurn<T>(work: () => Promise<T>): Promise<T> {
  if (working >= AT_ONCE) await new Promise<void>((go) => waiting.push(go));
  working++;
  try {
    return await work();
  } finally {
    working--;
    waiting.shift()?.();
  }
}

const unreadable = (message: string): AppError =>
  new AppError('invalid', { message, fields: [{ field: 'body', message }] });

/**
 * Reads a JPEG, PNG or WebP and writes it anew as JPEG. What the camera wrote about place, time and itself is left out
 * unless `keepPlace`; the small picture never carries it.
 * @throws AppError invalid: damaged, or more pixels than a camera makes
 */
export const readPhoto = (file: string, keepPlace: boolean): Promise<Photo> =>
  inTurn(async () => {
    const open = () => sharp(file, { limitInputPixels: PIXELS_MAX, failOn: 'truncated', pages: 1 });
    let size: { width: number; height: number };
    try {
      const { width, height } = await sharp(file, { limitInputPixels: false }).metadata();
      size = { width, height };
    } catch {
      throw unreadable(photoRefusals.damaged);
    }
    if (size.width * size.height > PIXELS_MAX)
      throw unreadable(photoRefusals.tooManyPixels(size.width, size.height, PIXELS_MAX / 1_000_000));
    try {
      const upright = open()
        .autoOrient()
        .resize({
          width: PHOTO_MAX_PIXELS,
          height: PHOTO_MAX_PIXELS,
          fit: 'inside',
          withoutEnlargement: true,
        })
        .flatten({ background: '#ffffff' })
        .toColourspace('srgb')
        .jpeg({ quality: 82, mozjpeg: false })
        .timeout({ seconds: SECONDS_MAX });
      if (keepPlace) upright.keepExif();
      const { data, info } = await upright.toBuffer({ resolveWithObject: true });
      const thumbnail = await sharp(data)
        .resize({
          width: THUMBNAIL_PIXELS,
          height: THUMBNAIL_PIXELS,
          fit: 'inside',
          withoutEnlargement: true,
        })
        .jpeg({ quality: 72 })
        .toBuffer();
      return { data, width: info.width, height: info.height, thumbnail };
    } catch (error) {
      throw unreadable(
        photoRefusals.unreadable(error instanceof Error ? (error.message.split('\n')[0] ?? '') : 'damaged'),
      );
    }
  });
