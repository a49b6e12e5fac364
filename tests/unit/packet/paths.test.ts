import { describe, expect, it } from 'vitest';
import { pathOperators } from '@/lib/packet/layer/paths';

const at = (data: string) => pathOperators(data, { x: 10, y: 20, scale: 2 }, 100);

describe('pathOperators', () => {
  it('places a drawing that runs downwards on a page that runs upwards', () => {
    expect(at('M0 0L5 0L5 5Z')).toBe('10 80 m 20 80 l 20 70 l h');
  });

  it('reads relative commands, and pairs that follow a move as lines', () => {
    expect(at('m1 1 2 0v3h-2z')).toBe('12 78 m 16 78 l 16 72 l 12 72 l h');
  });

  it('draws a half circle as two quarter curves that end where they should', () => {
    const operators = at('M0 5A5 5 0 0 1 10 5');
    expect(operators.match(/ c/g)).toHaveLength(2);
    // The top of the circle is five above its centre: (5, 0) in the drawing.
    expect(operators).toContain(' 20 80 c');
    expect(operators.endsWith('30 70 c')).toBe(true);
  });

  it('refuses a command it does not know', () => {
    expect(() => at('M0 0Q1 1 2 2')).toThrow('unknown path command Q');
  });
});
