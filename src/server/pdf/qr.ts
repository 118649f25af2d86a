import QRCode from 'qrcode';
import { COLOURS } from './colours';
import type { Sheet } from './sheet';

/**
 * Draws a QR symbol (error correction level M) as one path of rectangles, `side` points wide without its quiet zone:
 * the caller leaves four modules of white on each side.
 */
export function drawQr(sheet: Sheet, text: string, x: number, y: number, side: number): void {
  const { modules } = QRCode.create(text, { errorCorrectionLevel: 'M' });
  const pitch = side / modules.size;
  const boxes: { x: number; y: number; width: number; height: number }[] = [];
  for (let row = 0; row < modules.size; row += 1) {
    let column = 0;
    while (column < modules.size) {
      const start = column;
      while (column < modules.size && modules.get(row, column)) column += 1;
      if (column > start) {
        boxes.push({
          x: x + start * pitch,
          y: y + row * pitch,
          width: (column - start) * pitch,
          height: pitch,
        });
      }
      column += 1;
    }
  }
  sheet.as('Figure', () => sheet.rectangles(boxes, COLOURS.ink), { alt: `QR code that leads to ${text}` });
}
