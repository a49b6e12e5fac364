/** A box over a picture, in fractions of its width and height. */
export interface PictureBox {
  left: number;
  top: number;
  width: number;
  height: number;
}
/** In whole pixels; right and bottom are the first that are free again. */
export interface PixelBox {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

/** How many boxes one picture takes. */
export const mostBoxes = 50;

/** A JPEG with half the colour resolution is cut into squares of this many pixels; each is stored by itself. */
const grid = 16;
/** A decoder smooths colour over the edge of a square, so the pixels beside it still hold a trace of what is inside. */
const smoothed = 2;

/**
 * What a box covers: clamped to the picture, outward to the squares a JPEG is cut into, and past the pixels into which
 * a decoder smooths them. Null if nothing of it lies on the picture.
 *
 * @param size of the picture, in pixels
 * @example coveredPixels({ left: 0, top: 0, width: 0.1, height: 0.1 }, { width: 160, height: 160 })
 * // { left: 0, top: 0, right: 18, bottom: 18 }
 */
export function coveredPixels(box: PictureBox, size: { width: number; height: number }): PixelBox | null {
  const [left, right] = outward(box.left, box.width, size.width);
  const [top, bottom] = outward(box.top, box.height, size.height);
  return left < right && top < bottom ? { left, top, right, bottom } : null;
}

function outward(from: number, length: number, all: number): [number, number] {
  const clamp = (pixels: number) => Math.min(Math.max(pixels, 0), all);
  const [start, end] = [clamp(from * all), clamp((from + length) * all)];
  if (!(start < end)) return [0, 0];
  // What a browser sends as 32/320 may come out a hair beside 32.
  const near = 1e-6;
  return [
    clamp(Math.floor(start / grid + near) * grid - smoothed),
    clamp(Math.ceil(end / grid - near) * grid + smoothed),
  ];
}
