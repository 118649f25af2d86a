import QRCode from 'qrcode';
import { describe, expect, it, vi } from 'vitest';
import { finish } from '~/server/pdf/document';
import { Flow } from '~/server/pdf/flow';
import { drawQr } from '~/server/pdf/qr';
import { pixelsOf } from './tools';

vi.setConfig({ testTimeout: 60_000 });

describe('the QR symbol', () => {
  it('shows, when the page is printed, each module of the symbol of the address', async () => {
    const address = 'https://works.example/c/7F3K92QDHM0V';
    const flow = new Flow(1, () => undefined);
    drawQr(flow.sheet, address, 100, 200, 64);
    const pdf = await finish(flow, {
      title: 't',
      author: 'a',
      subject: 's',
      keywords: [],
      madeAt: new Date(0),
      attachment: null,
    });
    const dpi = 288;
    const page = pixelsOf(pdf, dpi);
    const { modules } = QRCode.create(address, { errorCorrectionLevel: 'M' });
    const pitch = 64 / modules.size;
    for (let row = -4; row < modules.size + 4; row += 1) {
      for (let column = -4; column < modules.size + 4; column += 1) {
        const inside = row >= 0 && column >= 0 && row < modules.size && column < modules.size;
        const dark =
          page((100 + (column + 0.5) * pitch) * (dpi / 72), (200 + (row + 0.5) * pitch) * (dpi / 72)) < 128;
        expect(dark, `row ${row}, column ${column}`).toBe(inside && modules.get(row, column) === 1);
      }
    }
  });
});
