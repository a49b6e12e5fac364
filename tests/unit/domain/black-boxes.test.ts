import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { coveredPixels } from '@/lib/domain/black-boxes';

// Squares of 16 pixels: the largest minimum coded unit of baseline JPEG with 4:2:0 (ITU-T T.81, annex A.2). The two pixels
// beyond are this project's own: a decoder's smoothing reaches one.
const size = { width: 320, height: 160 };
const covered = (left: number, top: number, width: number, height: number) =>
  coveredPixels({ left, top, width, height }, size);

describe('what a box covers', () => {
  it('goes outward to the squares and a little past them', () => {
    expect(covered(20 / 320, 20 / 160, 10 / 320, 20 / 160)).toEqual({ left: 14, top: 14, right: 34, bottom: 50 });
  });
  it('takes a box that lies on the squares as it is', () => {
    expect(covered(32 / 320, 32 / 160, 16 / 320, 16 / 160)).toEqual({ left: 30, top: 30, right: 50, bottom: 50 });
  });
  it('ends where the picture ends', () => {
    expect(covered(-0.5, -0.5, 2, 2)).toEqual({ left: 0, top: 0, right: 320, bottom: 160 });
    expect(covered(0.99, 0.99, 1, 1)).toEqual({ left: 302, top: 142, right: 320, bottom: 160 });
  });
  it.each([
    [1.1, 0, 1, 1],
    [0, -1, 1, 0.5],
    [0.5, 0.5, 0, 0.2],
    [Number.NaN, 0, 1, 1],
  ])('covers nothing beside the picture or without a size: %s %s %s %s', (...box) => {
    expect(covered(...box)).toBeNull();
  });
  it('covers every pixel that the box touches, and never leaves the picture', () => {
    const fraction = fc.double({ min: -0.5, max: 1.5, noNaN: true });
    const edge = fc.integer({ min: 1, max: 1600 });
    fc.assert(
      fc.property(fraction, fraction, fraction, fraction, edge, edge, (left, top, width, height, w, h) => {
        const pixels = coveredPixels({ left, top, width, height }, { width: w, height: h });
        if (pixels === null) return;
        expect(pixels.left).toBeGreaterThanOrEqual(0);
        expect(pixels.bottom).toBeLessThanOrEqual(h);
        const slack = 1e-3;
        expect(pixels.left).toBeLessThanOrEqual(Math.max(0, left * w) + slack);
        expect(pixels.right).toBeGreaterThanOrEqual(Math.min(w, (left + width) * w) - slack);
      }),
    );
  });
});
