import { describe, expect, it } from 'vitest';
import { markGeometry, stripeTurn, type MarkState } from '@/lib/domain/mark-geometry';

const hash = '9f2c41d70be86a53c41e77a05d1b0f6e2a9930cc71e4d8b266f0a1c93e5b7d10';
const states: MarkState[] = ['sealed', 'countersigned', 'waiting', 'struck', 'altered'];

const partsOf = (state: MarkState) => markGeometry(state, hash).shapes.map((shape) => shape.part);

/** Corners of a path that only moves and draws straight lines. */
function corners(d: string): [number, number][] {
  return [...d.matchAll(/[ML](-?[\d.]+) (-?[\d.]+)/gu)].map((found) => [Number(found[1]), Number(found[2])]);
}

function fromCentre([x, y]: [number, number]): number {
  return Math.hypot(x - 24, y - 24);
}

describe('stripeTurn', () => {
  it('leans twenty degrees to the left for the lowest hash and to the right for the highest', () => {
    expect(stripeTurn('00000000')).toBe(-20);
    expect(stripeTurn('ffffffff')).toBe(20);
  });

  it('stays within twenty degrees just inside both ends', () => {
    expect(stripeTurn('00000001')).toBeGreaterThan(-20);
    expect(stripeTurn('fffffffe')).toBeLessThan(20);
  });

  it('rests upright to its lean without a hash, and about there for the middle one', () => {
    expect(stripeTurn(undefined)).toBe(0);
    expect(stripeTurn('80000000')).toBeCloseTo(0, 5);
  });

  it('looks only at the first eight digits and reads both cases alike', () => {
    expect(stripeTurn('9F2C41D7' + 'f'.repeat(56))).toBe(stripeTurn(hash));
  });

  it('refuses what is not a hash', () => {
    expect(() => stripeTurn('9f2c41d')).toThrow(RangeError);
    expect(() => stripeTurn('zzzzzzzz')).toThrow(RangeError);
    expect(() => stripeTurn('')).toThrow(RangeError);
  });
});

describe('markGeometry', () => {
  it('draws one stripe when sealed, two when countersigned, an outline when waiting, a line when struck', () => {
    expect(partsOf('sealed')).toEqual(['washer', 'head', 'chamfer', 'stripe']);
    expect(partsOf('countersigned').filter((part) => part === 'stripe')).toHaveLength(2);
    expect(partsOf('waiting')).toContain('outline');
    expect(partsOf('waiting')).not.toContain('stripe');
    expect(partsOf('struck')).toContain('strike');
    expect(partsOf('struck')).not.toContain('stripe');
  });

  it('turns only the stripe with the hash', () => {
    const shapesBut = (leafHash: string) =>
      markGeometry('sealed', leafHash).shapes.filter((shape) => shape.part !== 'stripe');
    expect(shapesBut('00000000')).toEqual(shapesBut('ffffffff'));
    expect(markGeometry('sealed', '00000000').shapes).not.toEqual(markGeometry('sealed', 'ffffffff').shapes);
  });

  it('paints the washer piece of a broken stripe under the head and the head piece over it', () => {
    expect(partsOf('altered')).toEqual(['washer', 'stripe', 'head', 'chamfer', 'stripe']);
  });

  it('keeps the torn piece on the head: no corner lies beyond the hexagon', () => {
    for (const leafHash of ['00000000', hash, 'ffffffff']) {
      const torn = corners(markGeometry('altered', leafHash).shapes.at(-1)!.d);
      expect(torn.length).toBeGreaterThanOrEqual(4);
      for (const corner of torn) expect(fromCentre(corner)).toBeLessThanOrEqual(13.41);
    }
  });

  it('turns the head of an altered mark against its washer', () => {
    const headOf = (state: MarkState) => markGeometry(state, hash).shapes.find((shape) => shape.part === 'head')?.d;
    expect(headOf('altered')).not.toBe(headOf('sealed'));
    expect(headOf('struck')).toBe(headOf('sealed'));
  });

  it('lets the stripe of every state reach beyond the washer on both sides', () => {
    for (const state of ['sealed', 'countersigned', 'waiting'] as const) {
      const stripe = corners(markGeometry(state, hash).shapes.at(-1)!.d);
      for (const corner of stripe) expect(fromCentre(corner)).toBeGreaterThan(20);
    }
  });

  it('writes finite numbers only, for every state', () => {
    for (const state of states) {
      for (const { d } of markGeometry(state, hash).shapes) expect(d).not.toMatch(/NaN|Infinity|e-/u);
    }
  });
});
