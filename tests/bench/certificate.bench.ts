import fontkit from '@pdf-lib/fontkit';
import { PDFDocument, PDFFont } from 'pdf-lib';
import { renderCertificate } from '~/server/pdf/certificate';
import { buildStatement } from '../pdf/build-statement';
import { signatureOf } from '../pdf/render-statement';
import { byTurns, figure } from '../setup/figures';

interface Drawn {
  /** The files of the fonts that were embedded. */
  fonts: Uint8Array[];
  /** Every piece of text in order, with the place of its font in the list. */
  texts: { font: number; text: string }[];
}

/** What making the certificate embeds and draws, noted while it is made once. */
async function noteDrawn(make: () => Promise<unknown>): Promise<Drawn> {
  const drawn: Drawn = { fonts: [], texts: [] };
  const places = new Map<PDFFont, number>();
  const embedFont = Reflect.get(PDFDocument.prototype, 'embedFont');
  const encodeText = Reflect.get(PDFFont.prototype, 'encodeText');
  PDFDocument.prototype.embedFont = async function noting(bytes, options) {
    const font = await embedFont.call(this, bytes, options);
    if (!(bytes instanceof Uint8Array)) throw new Error('Fonts come as bytes.');
    places.set(font, drawn.fonts.push(bytes) - 1);
    return font;
  };
  PDFFont.prototype.encodeText = function noting(text) {
    drawn.texts.push({ font: places.get(this) ?? -1, text });
    return encodeText.call(this, text);
  };
  try {
    await make();
  } finally {
    PDFDocument.prototype.embedFont = embedFont;
    PDFFont.prototype.encodeText = encodeText;
  }
  return drawn;
}

figure({
  name: 'certificate',
  goal: 3,
  run: async () => {
    const statement = buildStatement();
    const signature = signatureOf(statement);
    const drawn = await noteDrawn(() => renderCertificate(statement, signature));
    if (drawn.texts.length < 100 || drawn.fonts.length < 4)
      throw new Error('The certificate drew too little.');
    return byTurns(
      () => renderCertificate(statement, signature),
      async () => {
        const document = await PDFDocument.create({ updateMetadata: false });
        document.registerFontkit(fontkit);
        const fonts: PDFFont[] = [];
        for (const bytes of drawn.fonts) fonts.push(await document.embedFont(bytes, { subset: true }));
        const page = document.addPage([595.28, 841.89]);
        drawn.texts.forEach(({ font, text }, at) => {
          const embedded = fonts[font];
          if (embedded === undefined) throw new Error('A font was not embedded.');
          page.drawText(text, { x: 40, y: 800 - at * 4, size: 9, font: embedded });
        });
        await document.save();
      },
    );
  },
});
