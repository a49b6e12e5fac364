import { describe, expect, it } from 'vitest';
import { breakLines, cleanText, shapeLine, widthOf } from '@/lib/packet/layer/shaping';

const read = (text: string) => shapeLine(text, 'text').runs.map((run) => run.text);

describe('cleanText', () => {
  it('takes out controls and direction overrides and makes a lone surrogate visible', () => {
    expect(cleanText('a\u0007b\u202ec\ud800d\te\r\nf')).toBe('abc\ufffdd e\nf');
  });

  it('composes letters and their marks', () => {
    expect(cleanText('e\u0301')).toBe('\u00e9');
  });
});

describe('shapeLine', () => {
  it('takes the face that has a grapheme, and keeps the rest in its own', () => {
    const files = shapeLine('oil 机油 ok', 'text').runs.map((run) => run.face.file);
    expect(files).toEqual(['Barlow_400Regular.ttf', 'fallback/NotoSansSC_400Regular.ttf', 'Barlow_400Regular.ttf']);
  });

  it('draws Hebrew from right to left, letter by letter, and says each letter', () => {
    expect(read('\u05e9\u05de\u05df')).toEqual(['\u05df', '\u05de', '\u05e9']);
  });

  it('turns only what runs from right to left in a mixed line', () => {
    expect(read('oil \u05e9\u05de')).toEqual(['oil ', '\u05de', '\u05e9']);
  });

  it('keeps a box for a character no face has', () => {
    const missing = shapeLine('a\u0e17', 'text').runs.filter(({ isMissing }) => isMissing);
    expect(missing.map(({ text }) => text)).toEqual(['\u0e17']);
    expect(missing[0]?.width).toBeGreaterThan(0);
  });
});

describe('breakLines', () => {
  it('makes no line wider than asked, even of one word without an end', () => {
    for (const line of breakLines('Gearbox'.repeat(60), 'text', 9, 120)) {
      expect(widthOf(line, 'text', 9)).toBeLessThanOrEqual(120);
    }
  });

  it('loses nothing but the spaces at line ends', () => {
    const text = 'Engine oil, oil filter, primary chaincase fluid and 更换机油和滤清器 at 10,238 mi';
    const lines = breakLines(text, 'text', 9, 90);
    expect(lines.length).toBeGreaterThan(2);
    expect(lines.join('').replaceAll(' ', '')).toBe(text.replaceAll(' ', ''));
  });

  it('keeps a figure with its unit, and a grade whole', () => {
    const text = 'Filled 4.25 US qt of SAE 20W-50';
    for (let width = 40; width < 200; width += 3) {
      const lines = breakLines(text, 'text', 9, width);
      expect(
        lines.some((line) => line.includes('4.25 US qt')),
        `${width}`,
      ).toBe(true);
      expect(
        lines.some((line) => line.includes('20W-50')),
        `${width}`,
      ).toBe(true);
    }
  });

  it('begins a new line where the text does', () => {
    expect(breakLines('one\ntwo\n\nthree', 'text', 9, 400)).toEqual(['one', 'two', '', 'three']);
  });
});
