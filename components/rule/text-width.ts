/** Advance widths of Barlow SemiBold in thousandths of the type size, each rounded up to the next fifty. */
const advances: [number, string][] = [
  [200, " '|"],
  [250, '`l'],
  [300, ',.Iij'],
  [350, '!"();{}'],
  [400, '*1:frt'],
  [450, '-/[\\]'],
  [500, '+7<=>?^syz'],
  [550, '35689_aceghknuvx~'],
  [600, '$024EFJLPQSTYZbdopq'],
  [650, 'ABCDGHKORUVX'],
  [700, '#&N'],
  [750, 'M'],
  [800, 'w'],
  [850, '%@m'],
  [900, 'W'],
];

const advanceOf = new Map(
  advances.flatMap(([advance, letters]) => [...letters].map((letter) => [letter, advance] as const)),
);

/** What another script or an accented letter may take: a full square. */
const unknownAdvance = 1000;

/** An upper bound in px for text set in Barlow SemiBold, so that a drawing can keep room without measuring. */
export function textWidthPx(text: string, sizePx: number): number {
  const thousandths = [...text].reduce((sum, letter) => sum + (advanceOf.get(letter) ?? unknownAdvance), 0);
  return Math.ceil((thousandths * sizePx) / 1000);
}
