import 'server-only';
import QRCode from 'qrcode';
import { colours } from '../layer/colours';
import type { Sheet } from './sheet';

/** ISO/IEC 18004: four modules of quiet zone on every side. */
const quietModules = 4;

/** A QR code with its quiet zone in a square of `size` points. Runs of modules are drawn as one bar. */
export function drawQr(sheet: Sheet, text: string, alt: string, x: number, y: number, size: number): void {
  const { modules } = QRCode.create(text, { errorCorrectionLevel: 'M' });
  const edge = size / (modules.size + 2 * quietModules);
  const { layer } = sheet;
  layer.tag(
    'Figure',
    () => {
      layer.rect(x, y, size, size, { fill: colours.white });
      for (let row = 0; row < modules.size; row++) {
        let column = 0;
        while (column < modules.size) {
          let end = column;
          while (end < modules.size && modules.get(row, end) === 1) end++;
          if (end > column) {
            const [left, top] = [x + (column + quietModules) * edge, y + (row + quietModules) * edge];
            // A hair of overlap keeps a viewer's rounding from leaving white lines between rows.
            layer.rect(left, top, (end - column) * edge, edge * 1.02, { fill: '#000000' });
          }
          column = Math.max(end, column + 1);
        }
      }
    },
    { alt, box: [x, y, x + size, y + size] },
  );
}
