import { readFileSync } from 'node:fs';
import fontkit from '@pdf-lib/fontkit';
import { describe, expect, it } from 'vitest';
import { textWidthPx } from '@/components/rule/text-width';

describe('textWidthPx', () => {
  it('is never below what the shipped face needs, and at most fifty thousandths above, for every ASCII letter', () => {
    const face = fontkit.create(readFileSync('fonts/Barlow_600SemiBold.ttf'));
    for (let code = 0x20; code < 0x7f; code += 1) {
      const letter = String.fromCharCode(code);
      const trueThousandths = (face.glyphForCodePoint(code).advanceWidth * 1000) / face.unitsPerEm;
      const ours = textWidthPx(letter, 1000);
      expect(ours, letter).toBeGreaterThanOrEqual(trueThousandths);
      expect(ours - trueThousandths, letter).toBeLessThanOrEqual(50);
    }
  });
});
