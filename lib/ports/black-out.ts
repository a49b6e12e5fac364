import 'server-only';
import sharp from 'sharp';
import { coveredPixels, type PictureBox } from '@/lib/domain/black-boxes';
import { copyJpeg, mostPixels, oneAtATime, thumbOf } from './image';

export interface BlackedOut {
  width: number;
  height: number;
  /** JPEG without any metadata. */
  copy: Buffer;
  /** WebP for lists, made from the new picture. */
  thumb: Buffer;
}

/**
 * A shared copy anew with boxes of it black: decoded to pixels, those overwritten, encoded from pixels. No byte of the
 * old file is carried over, so nothing of what was there can be brought back. Throws if a box covers nothing, or if the
 * copy does not decode whole.
 */
export function blackOut(copy: Buffer, boxes: readonly PictureBox[]): Promise<BlackedOut> {
  return oneAtATime()(async () => {
    const { data, info } = await sharp(copy, { failOn: 'warning', limitInputPixels: mostPixels })
      .toColourspace('srgb')
      .removeAlpha()
      .raw()
      .toBuffer({ resolveWithObject: true });
    const { width, height, channels } = info;
    for (const box of boxes) {
      const covered = coveredPixels(box, { width, height });
      if (covered === null) throw new Error('This box covers nothing of the picture.');
      for (let y = covered.top; y < covered.bottom; y++) {
        data.fill(0, (y * width + covered.left) * channels, (y * width + covered.right) * channels);
      }
    }
    const made = await sharp(data, { raw: { width, height, channels } }).jpeg(copyJpeg).toBuffer();
    return { width, height, copy: made, thumb: await thumbOf(made) };
  });
}
