import 'server-only';
import { markGeometry, type MarkPart, type MarkState } from '@/lib/domain/mark-geometry';
import { colours } from '../layer/colours';
import type { Paint } from '../layer/layer';
import type { Sheet } from './sheet';

const paints: Record<MarkPart, Paint> = {
  washer: { fill: colours.steel, stroke: colours.ink, width: 1.6 },
  head: { fill: colours.white, stroke: colours.ink, width: 1.8 },
  chamfer: { stroke: colours.line, width: 0.9 },
  stripe: { fill: colours.lacquer, stroke: colours.ink, width: 1.2 },
  outline: { stroke: colours.ink, width: 1.6, dash: [3.2, 2.2] },
  strike: { stroke: colours.ink, width: 2.6 },
};
/** The struck mark's greys are mixed here: the file holds no transparency. */
const struckInk = '#9ba3a1';

export const markWords: Record<MarkState, string> = {
  sealed: 'sealed',
  countersigned: 'countersigned',
  waiting: 'sealed, time stamp waiting',
  struck: 'struck',
  altered: 'altered',
};

/** The witness mark of an entry in a square of `size` points. */
export function drawMark(sheet: Sheet, state: MarkState, leafHash: string, x: number, y: number, size: number): void {
  const { box, shapes } = markGeometry(state, leafHash);
  const scale = size / box;
  sheet.layer.tag(
    'Figure',
    () => {
      for (const { part, d } of shapes) {
        const paint = paints[part];
        const isGrey = state === 'struck' && part !== 'strike';
        sheet.layer.path(
          d,
          { x, y, scale },
          {
            ...paint,
            ...(isGrey && paint.stroke !== undefined ? { stroke: struckInk } : {}),
            width: (paint.width ?? 1) * scale,
            ...(paint.dash === undefined ? {} : { dash: paint.dash.map((length) => length * scale) }),
          },
        );
      }
    },
    { alt: `Witness mark: ${markWords[state]}`, box: [x, y, x + size, y + size] },
  );
}
